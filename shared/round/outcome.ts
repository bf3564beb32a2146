import type { DeficiencyClass } from '../checklist/check'
import type { EntryKind, PayloadOf, Place, ReadingValue } from '../entry/entry'
import type { Face, Line } from '../line/line'

/** What a reading, a check or an element comes to (product.md, Verdict). */
export const VERDICTS = ['conforms', 'doesNotConform', 'withinError', 'groundNotFinished', 'noLimit', 'notApplicable', 'notInspected', 'notRead'] as const
export type Verdict = (typeof VERDICTS)[number]

/** How a deficiency stands. The last five are its ends. */
export const DEFICIENCY_STATES = ['open', 'assigned', 'cannot', 'corrected', 'offered', 'disputed', 'endedCorrected', 'endedAccepted', 'endedDecided', 'endedReferred', 'endedInError'] as const
export type DeficiencyState = (typeof DEFICIENCY_STATES)[number]

/** Whether a deficiency has come to one of its five ends. */
export function isEnded(deficiency: { state: DeficiencyState }): boolean {
  return deficiency.state.startsWith('ended')
}

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
  /** The settlement by which another reading at this place stands; this one is shown and does not count. */
  overruledBy: string | null
}

/** What one check on one element (and face) comes to. */
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
  /** Readings that are no longer the newest word (replaced, read again, entered in error), in the order in which they answer one another. */
  earlier: string[]
  /** Why it was not read, where that was said. */
  setAside: { entry: string, as: PayloadOf<'setAside'>['as'], why: PayloadOf<'setAside'>['why'] } | null
  /** Corrections that disturbed it and that no reading here has looked at yet: the next reading names them in `answers`. */
  disturbedBy: string[]
  /** Bays that still want a reading, where each bay wants one. */
  baysMissing: number
}

/** One finding that did not conform, and how it stands. */
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
  /** What the next word on it names in `answers`: the readings that stand, and the corrections that nobody has looked at yet. */
  standing: { entry: string, kind: EntryKind }[]
  /** Account of who is to correct it; the name, also of a person without an account, stands in the assignment. */
  assignedTo: string | null
  due: string | null
  waitsFor: string | null
  /** For accepted deviations. */
  until: string | null
  /** How it is held, from the last dangerNow entry. */
  held: 'closed' | 'taped' | 'removed' | 'attended' | 'heldOpen' | 'sentRound' | 'other' | null
}

/** What an element comes to over all its checks. */
export interface ElementOutcome {
  element: string
  verdict: Verdict
  settled: boolean
  /**
   * Nothing open of class outOfUse or correctFirst, everything read or set aside with a reason, nothing to be read again. An element on which
   * nobody looked at anything is not released, nor one with a check that is only not yet inspected.
   */
  released: boolean
  /** Held out of use: an open deficiency of class outOfUse. */
  outOfUse: boolean
  tasks: number
  answered: number
}

/** Why an entry does not count. */
export type IgnoredWhy = 'twoEntriesOneId' | 'namesNoReading' | 'ownReading' | 'notInBasis' | 'groupNotAllowed' | 'methodDiffers' | 'noSuchElement' | 'classDoesNotAllow' | 'fallen'
/** Why a link is not followed. */
export type RefusedLinkWhy = 'kindOrSubject' | 'cycle' | 'noReason' | 'doesNotDisturb'

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
  ignored: { entry: string, why: IgnoredWhy }[]
  /** Links that the rules do not follow; the entry itself counts. */
  refusedLinks: { entry: string, target: string, why: RefusedLinkWhy }[]
  /** Readings whose payload was erased: they come to nothing any more, and their place is to be read again. */
  erased: string[]
  /** What stands side by side and needs a person: bases in force at once, edits of one element that do not know of one another. */
  conflicts: { of: 'basis' | 'line', entries: string[] }[]
  /** The line as built: that of the basis with the edits of the walk. */
  line: Line
  tally: Record<Verdict, number>
}
