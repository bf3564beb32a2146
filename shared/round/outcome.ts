import type { DeficiencyClass } from '../checklist/check'
import type { Place, ReadingValue } from '../entry/entry'
import type { Face } from '../line/line'

/** What a reading, a check or an element comes to (product.md, Verdict). */
export const VERDICTS = ['conforms', 'doesNotConform', 'withinError', 'groundNotFinished', 'noLimit', 'notApplicable', 'notInspected', 'notRead'] as const
export type Verdict = (typeof VERDICTS)[number]

/** How a deficiency stands. The last five are its ends. */
export const DEFICIENCY_STATES = ['open', 'assigned', 'cannot', 'corrected', 'offered', 'disputed', 'endedCorrected', 'endedAccepted', 'endedDecided', 'endedReferred', 'endedInError'] as const
export type DeficiencyState = (typeof DEFICIENCY_STATES)[number]

/** A reading that is the newest word at its place, with what it comes to. */
export interface Head {
  entry: string
  place: Place | null
  value: ReadingValue
  verdict: Verdict
  /** Signed distance to the nearest limit in the unit of the check, inside positive; null where there is none. */
  margin: number | null
  /** Key of the limit that decided, in the basis. */
  limit: string | null
  /** True when the figure of the other system would decide otherwise. */
  otherSystemDiffers: boolean
  author: string
  madeAt: string
  /** Entry ids of a disagreement at the same place that nobody has settled. */
  disagreesWith: string[]
}

export interface CheckOutcome {
  element: string
  check: string
  face: Face | null
  verdict: Verdict
  /** True when it did not conform once and every such finding has ended: shown as a torn corner with a knot. */
  settled: boolean
  /** True when a correction disturbed it and it is to be read again. */
  readAgain: boolean
  heads: Head[]
  /** The head that governs the verdict, worst first; null when not read. */
  governs: string | null
}

export interface DeficiencyOutcome {
  /** Id of the reading that found it. */
  id: string
  tag: string
  element: string
  check: string
  place: Place | null
  class: DeficiencyClass
  state: DeficiencyState
  /** Entry ids in the order in which they answer one another. */
  history: string[]
  assignedTo: string | null
  due: string | null
  waitsFor: string | null
  /** For accepted deviations. */
  until: string | null
  /** How it is held, from the last dangerNow entry. */
  held: 'closed' | 'taped' | 'removed' | 'attended' | 'heldOpen' | 'sentRound' | 'other' | null
}

export interface ElementOutcome {
  element: string
  verdict: Verdict
  settled: boolean
  /** Nothing open of class outOfUse or correctFirst, everything read or set aside with a reason. */
  released: boolean
  /** Held out of use: an open deficiency of class outOfUse. */
  outOfUse: boolean
  tasks: number
  answered: number
}

/** What a round comes to: the fold of its entries over its basis. A pure value; same entries in any order give the same one. */
export interface RoundOutcome {
  rules: number
  /** Digest of the basis in force. */
  basis: string
  elements: ElementOutcome[]
  checks: CheckOutcome[]
  deficiencies: DeficiencyOutcome[]
  /** Ids of entries whose targets are not known yet. */
  waiting: string[]
  /** Ids of entries of a kind or version that these rules do not know: nothing may be signed over them. */
  unknown: string[]
  /** Ids of entries that the rules set aside, with the reason. */
  ignored: { entry: string, why: string }[]
  tally: Record<Verdict, number>
}
