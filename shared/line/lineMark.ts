import type { DiamondState, TapeState } from '../drawing/displayList'
import type { Place } from '../entry/entry'
import type { DeficiencyState, RoundOutcome, Verdict } from '../round/outcome'
import type { Line, LineElement } from './line'
import { elementsOf } from './line'
import type { Length } from '../measure/length'

/** A tag of flagging tape on an element. */
export interface LineTag {
  words: string
  state: TapeState
  /** From the element's start along the line; null where the place is not known: it hangs in the middle. */
  along: Length | null
}

/** How an element wears its state on the line drawing. An element without one is drawn bare, without a diamond. */
export interface LineMark {
  verdict: Verdict
  settled: boolean
  /** Held out of use; drawn as a strip of tape, never across an exit. */
  outOfUse: boolean
  tags: LineTag[]
}
/** Marks by element id. */
export type LineMarks = Readonly<Record<string, LineMark>>

/** The diamond that a mark shows: a settled finding keeps its torn corner with a knot once the element conforms. */
export function diamondOf(mark: LineMark): DiamondState {
  return mark.settled && mark.verdict === 'conforms' ? 'settled' : mark.verdict
}

/** Where a place stands along its element, from the element's start; the middle of the bay when only that is known; null when neither is. */
export function placeAlong(element: LineElement, place: Place | null): Length | null {
  if (place?.from) {
    const distance = Math.min(place.from.distance, element.length)
    return place.from.end === 'start' ? distance : element.length - distance
  }
  if (place?.bay && place.bay <= element.bays) return Math.round(element.length * (2 * place.bay - 1) / (2 * element.bays))
  return null
}

const TAPE_OF: Record<DeficiencyState, TapeState | null> = {
  open: 'open', assigned: 'open', disputed: 'open', cannot: 'waits', corrected: 'readAgain', offered: 'readAgain',
  endedCorrected: 'settled', endedAccepted: 'settled', endedDecided: 'settled', endedReferred: 'settled',
  // a finding that never was leaves no tape on the fence
  endedInError: null,
}

/** The tape that a deficiency in this state hangs on the fence; null for none. */
export function tapeOf(state: DeficiencyState): TapeState | null {
  return TAPE_OF[state]
}

/** What a round's outcome puts on the line. Elements that the outcome does not know stand as not read. */
export function lineMarksOf(line: Line, outcome: RoundOutcome): Record<string, LineMark> {
  const outcomes = new Map(outcome.elements.map(element => [element.element, element]))
  return Object.fromEntries(elementsOf(line).map((element) => {
    const of = outcomes.get(element.id)
    const tags = outcome.deficiencies.flatMap((deficiency): LineTag[] => {
      const state = deficiency.element === element.id ? TAPE_OF[deficiency.state] : null
      return state ? [{ words: deficiency.tag, state, along: placeAlong(element, deficiency.place) }] : []
    })
    return [element.id, { verdict: of?.verdict ?? 'notRead', settled: of?.settled ?? false, outOfUse: of?.outOfUse ?? false, tags }]
  }))
}
