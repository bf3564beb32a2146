import { readFileSync, readdirSync } from 'node:fs'
import path from 'node:path'
import { describe, expect, it } from 'vitest'
import { drawLive, type LiveName, type LiveParameters } from '#shared/drawing/live/drawLive'
import { clashOf, placeLimits } from '#shared/drawing/live/placedLimit'
import { parseChecklists } from '#shared/checklist/parseChecklists'
import type { PublishedFact } from '#shared/checklist/publishedFact'
import type { Limit } from '#shared/limit/limit'
import { elementsOf } from '#shared/line/line'
import { FOOT, INCH } from '#shared/measure/length'
import type { WalkCheck } from '#shared/round/walkPlan'
import { drawingOf, limitsBeside } from '~/composables/useWalkDrawing'
import { basisOf, element, GATE } from '../../../helpers/roundStory'

const folder = path.resolve(import.meta.dirname, '../../../../templates')
const texts = (of: string) => readdirSync(path.join(folder, of)).filter(name => name.endsWith('.yaml')).map(name => readFileSync(path.join(folder, of, name), 'utf8'))
const facts = JSON.parse(readFileSync(path.join(folder, 'facts/published-limits.json'), 'utf8')) as PublishedFact[]
const checklists = parseChecklists({ checklists: texts('checklists'), sections: texts('checklists/sections') }, facts)
const checks = [...new Map(checklists.flatMap(list => list.checks).map(check => [check.id, check])).values()]

const gate = elementsOf(basisOf().line).find(one => one.id === GATE)!
const run = element('019a0007-0000-7000-8000-000000000009', 'R9', { length: 40 * FOOT, rise: FOOT })
const limit = (id: string, datum: string, low: number | null, high: number | null): Limit => ({
  id, measurand: 'latch-release-height', datum, unit: 'length', avoid: null, basis: { kind: 'builtIn', name: id },
  low: low === null ? null : { imperial: low * INCH, inclusive: true }, high: high === null ? null : { imperial: high * INCH, inclusive: true },
})
const standing = (id: string, limits: string[] = []): WalkCheck => ({
  check: checks.find(check => check.id === id)!, limits, line: false, open: [],
  outcome: { element: gate.id, check: id, face: null, verdict: 'notRead', settled: false, readAgain: false, heads: [], governs: null, earlier: [], setAside: null, disturbedBy: [], baysMissing: 0 },
})
const LIMITS = { pool: limit('pool', 'bottom-of-leaf', 54, null), reach: limit('reach', 'ground', null, 54) }

describe('the drawing of a check in hand', () => {
  it('is there and can be drawn, before and after reading, for every measured check in inches that names one', () => {
    const measured = checks.filter(check => check.method === 'measure' && check.unit === 'length' && typeof check.drawing === 'string' && !['tieEnd', 'closing'].includes(check.drawing))
    expect(measured.length).toBeGreaterThan(25)
    const undrawn: string[] = []
    for (const check of measured) {
      for (const value of [null, { method: 'measure' as const, amount: 3 * INCH, text: '3 in', system: 'imperial' as const }]) {
        const drawing = drawingOf({ one: { ...standing(check.id), check }, element: check.elements.includes('gate') ? gate : run, limits: {}, value, system: 'imperial', language: 'en' })
        if (drawing === null) undrawn.push(check.id)
        else expect(drawLive(drawing.name as LiveName, { ...drawing.parameters, say: (word: string) => word } as unknown as LiveParameters[LiveName]).list.length).toBeGreaterThan(3)
      }
    }
    // No ties, bands, rails or things stand between line posts: the picture of a spacing knows none of them.
    expect([...new Set(undrawn)]).toEqual(['post-spacing'])
  })

  it('leaves a limit on another datum out, unless it was brought to ours', () => {
    const one = standing('latch-height-leaf', ['pool', 'reach'])
    const drawing = drawingOf({ one, element: gate, limits: LIMITS, value: null, system: 'imperial', language: 'en' })!
    expect((drawing.parameters as unknown as { limits: { limit: Limit }[] }).limits.map(each => each.limit.id)).toEqual(['pool'])
  })
})

describe('limits from leaf and ground on one latch', () => {
  const both = [standing('latch-height-leaf', ['pool']), standing('latch-height-ground', ['reach'])]
  it('clash by the gap under the leaf: at least 54 in over the leaf, at most 54 in over the ground, 1 1/2 in apart', () => {
    const beside = limitsBeside(both[0]!, both, LIMITS, 1.5 * INCH)
    expect(beside).toEqual([{ limit: LIMITS.reach, shift: -1.5 * INCH }])
    const clash = clashOf(placeLimits({ limits: [{ limit: LIMITS.pool }, ...beside], reading: null, system: 'imperial', say: word => word }))!
    expect([clash.from, clash.to]).toEqual([52.5 * INCH, 54 * INCH])
  })

  it('are the same clash from the other datum', () => {
    const beside = limitsBeside(both[1]!, both, LIMITS, 1.5 * INCH)
    const clash = clashOf(placeLimits({ limits: [{ limit: LIMITS.reach }, ...beside], reading: null, system: 'imperial', say: word => word }))!
    expect(clash.to - clash.from).toBe(1.5 * INCH)
  })

  it('are not brought together while nobody has read that gap', () => {
    expect(limitsBeside(both[0]!, both, LIMITS, null)).toEqual([])
  })
})
