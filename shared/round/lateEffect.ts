import { worse } from './checkOutcomes'
import type { RoundOutcome } from './outcome'
import { isEnded } from './outcome'

/** What makes an entry adverse that came after the set was signed. */
export type AdverseWhy = 'finding' | 'reopened' | 'worseReading' | 'readAgain' | 'notReleased' | 'graver' | 'cannotTell' | 'otherBasis'
export interface Adverse { why: AdverseWhy, element: string | null, check: string | null, deficiency: string | null }

/**
 * What late entries change: `signed` is the fold of the signed set, `all` the fold of the same entries with the late ones. Harmless ones (an empty answer) are
 * listed as late; an adverse one holds the sealing until the manager decides with the signers (contracts.md 4). What cannot be told counts as adverse.
 */
export function lateEffect(signed: RoundOutcome, all: RoundOutcome): Adverse[] {
  const adverse: Adverse[] = []
  const say = (why: AdverseWhy, about: Partial<Adverse> = {}) => adverse.push({ why, element: null, check: null, deficiency: null, ...about })
  const news = (before: readonly string[], after: readonly string[]) => after.some(id => !before.includes(id))

  if (signed.basis !== all.basis) say('otherBasis')
  if (news(signed.unknown, all.unknown) || news(signed.waiting, all.waiting) || news(signed.erased, all.erased) || all.conflicts.length > signed.conflicts.length
    || all.ignored.some(one => one.why === 'twoEntriesOneId' && !signed.ignored.some(other => other.entry === one.entry && other.why === one.why))) say('cannotTell')

  const deficiencies = new Map(signed.deficiencies.map(one => [one.id, one]))
  for (const one of all.deficiencies) {
    const before = deficiencies.get(one.id)
    const about = { element: one.element, check: one.check, deficiency: one.id }
    if (!before) say('finding', about)
    else if (isEnded(before) && !isEnded(one)) say('reopened', about)
    else if (before.class !== one.class) say('graver', about)
  }
  const keyOf = (one: { element: string, check: string, face: string | null }) => `${one.element} ${one.check} ${one.face ?? ''}`
  const checks = new Map(signed.checks.map(check => [keyOf(check), check]))
  for (const check of all.checks) {
    const before = checks.get(keyOf(check))
    const about = { element: check.element, check: check.check }
    if (before && before.verdict !== check.verdict && worse(before.verdict, check.verdict) === check.verdict) say('worseReading', about)
    if (check.readAgain && !before?.readAgain) say('readAgain', about)
  }
  const elements = new Map(signed.elements.map(one => [one.element, one]))
  for (const one of all.elements) {
    const before = elements.get(one.element)
    if ((before?.released && !one.released) || (!before && !one.released)) say('notReleased', { element: one.element })
  }
  return adverse
}
