// eslint-disable-next-line @typescript-eslint/triple-slash-reference -- an ambient module, which the tests type-check without the server folder around it
/// <reference path="./yamlText.d.ts" />
import schoolGroundsList from '../../../templates/checklists/school-grounds.yaml?raw'
import playgroundList from '../../../templates/checklists/playground.yaml?raw'
import poolAdjacentList from '../../../templates/checklists/pool-adjacent.yaml?raw'
import accessible from '../../../templates/checklists/sections/accessible.yaml?raw'
import automatic from '../../../templates/checklists/sections/automatic.yaml?raw'
import barbed from '../../../templates/checklists/sections/barbed.yaml?raw'
import edges from '../../../templates/checklists/sections/edges.yaml?raw'
import exits from '../../../templates/checklists/sections/exits.yaml?raw'
import gates from '../../../templates/checklists/sections/gates.yaml?raw'
import handover from '../../../templates/checklists/sections/handover.yaml?raw'
import height from '../../../templates/checklists/sections/height.yaml?raw'
import latches from '../../../templates/checklists/sections/latches.yaml?raw'
import openings from '../../../templates/checklists/sections/openings.yaml?raw'
import playground from '../../../templates/checklists/sections/playground.yaml?raw'
import pool from '../../../templates/checklists/sections/pool.yaml?raw'
import posts from '../../../templates/checklists/sections/posts.yaml?raw'
import surroundings from '../../../templates/checklists/sections/surroundings.yaml?raw'
import ties from '../../../templates/checklists/sections/ties.yaml?raw'
import facts from '../../../templates/facts/published-limits.json'
import type { Checklist } from '#shared/checklist/check'
import { parseChecklists } from '#shared/checklist/parseChecklists'
import { publishedFactsSchema } from '#shared/checklist/publishedFact'
import type { PublishedFact } from '#shared/checklist/publishedFact'

/** Every section that a built-in checklist may be composed of. */
const sections = [accessible, automatic, barbed, edges, exits, gates, handover, height, latches, openings, playground, pool, posts, surroundings, ties]

let published: PublishedFact[] | undefined
let lists: Checklist[] | undefined

/** The published statements that the program ships with, checked on first use. */
export function readPublishedFacts(): PublishedFact[] {
  published ??= publishedFactsSchema.parse(facts)
  return published
}

/** The built-in checklists, from the texts that are built into the program; throws ChecklistError where one is wrong. Parsed once a process. */
export function readBuiltIn(): Checklist[] {
  lists ??= parseChecklists({ checklists: [schoolGroundsList, playgroundList, poolAdjacentList], sections }, readPublishedFacts())
  return lists
}
