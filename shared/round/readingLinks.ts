import type { Check } from '../checklist/check'
import type { Place } from '../entry/entry'
import type { Face, LineElement } from '../line/line'
import type { DeficiencyOutcome, Head } from './outcome'
import { samePlace } from './samePlace'
import type { WalkCheck } from './walkPlan'

/** The place that a reading of a check is of unless somebody says otherwise: the bay in hand of a run, for checks that are answered by place. */
export function usualPlace(check: Pick<Check, 'answeredFor'>, element: LineElement, face: Face | null, bay: number | null): Place {
  const placed = element.kind === 'run' && check.answeredFor !== 'once' && check.answeredFor !== 'face'
  return { face, bay: placed ? bay : null, from: null, height: null }
}

/** Readings that still stand at a place. */
export function headsAt({ check, outcome }: WalkCheck, place: Place, element: LineElement): Head[] {
  return outcome.heads.filter(head => samePlace(head.place, place, check.placeTolerance, element.length))
}

/** How a reading stands to those that are there already. */
export type ReadingRelation = 'first' | 'again' | 'ask'

/**
 * Whether a reading at this place is the first there, is read again (after a correction, or after something disturbed it), or must be asked about: then it
 * either takes the place of the one that stands there or stands beside it, and the worse counts.
 */
export function relationAt(one: WalkCheck, place: Place, element: LineElement, again: DeficiencyOutcome | null): ReadingRelation {
  if (again !== null || one.outcome.disturbedBy.length > 0) return 'again'
  return headsAt(one, place, element).length > 0 ? 'ask' : 'first'
}

/** What an entry names. */
export interface Links { answers: string[], replaces: string[] }

/** Whose a set-aside is: of this check (a reading replaces it), of the whole element (a reading has looked at it), or not known here. */
export type AsideOf = (entry: string) => 'check' | 'element' | null

function asideLinks({ outcome }: WalkCheck, asideOf: AsideOf): Links {
  const entry = outcome.setAside?.entry
  const of = entry === undefined ? null : asideOf(entry)
  return { answers: of === 'element' ? [entry!] : [], replaces: of === 'check' ? [entry!] : [] }
}

/**
 * What a reading at a place names (contracts.md 2, "later is never a time"): every correction that disturbed the check, the readings at that place, and for a
 * deficiency that is looked at again what stands of it. `replacing`: it takes the place of the readings there, which then need a reason where they did not conform.
 * `another`: it is a finding of its own, beside those at the same place, and names none of them.
 */
export function readingLinks(one: WalkCheck, place: Place, element: LineElement, { again = null, replacing = false, another = false, asideOf }: { again?: DeficiencyOutcome | null, replacing?: boolean, another?: boolean, asideOf: AsideOf }): Links {
  const aside = asideLinks(one, asideOf)
  const there = headsAt(one, place, element).filter(head => !another || head.verdict !== 'doesNotConform').map(head => head.entry)
  return {
    answers: unique([...one.outcome.disturbedBy, ...(replacing ? [] : there), ...(again?.standing.map(each => each.entry) ?? []), ...aside.answers]),
    replaces: unique([...(replacing ? there : []), ...aside.replaces]),
  }
}

/**
 * What a look that is confirmed with its group names. Readings that do not conform are left out: a look along the whole element is no look at that one spot, and
 * must not end what was found there.
 */
export function groupLinks(one: WalkCheck, asideOf: AsideOf): Links {
  const aside = asideLinks(one, asideOf)
  return {
    answers: unique([...one.outcome.disturbedBy, ...one.outcome.heads.filter(head => head.verdict !== 'doesNotConform').map(head => head.entry), ...aside.answers]),
    replaces: unique(aside.replaces),
  }
}

/** The open finding that a reading which does not conform goes on with; null when it is a new one, which wants a tag of its own. */
export function continuedFinding(one: WalkCheck, links: Links): DeficiencyOutcome | null {
  const named = new Set([...links.answers, ...links.replaces])
  return one.open.find(each => each.standing.some(word => word.kind === 'reading' && named.has(word.entry))) ?? null
}

/** What a correction of deficiencies names: the readings that stand, and the corrections before it. */
export function correctionAnswers(deficiencies: readonly DeficiencyOutcome[]): string[] {
  return unique(deficiencies.flatMap(one => one.standing.map(word => word.entry)))
}

const unique = (ids: readonly string[]) => [...new Set(ids)].sort()
