import type { AnyEntry, PayloadOf, Place } from '../entry/entry'
import type { CarriedOver } from './carryOver'
import { inOrder } from './findDeficiencies'
import type { ReadingJudgement } from './judgeReading'
import type { EntryLinks } from './linkEntries'
import type { CheckOutcome, DeficiencyOutcome, Head, Verdict } from './outcome'
import { isEnded } from './outcome'
import { isHead } from './settleReadings'
import { samePlace } from './samePlace'
import type { ReadingThreads } from './threadReadings'
import type { Slot, WalkSlots } from './walkSlots'

/** Verdicts from the worst to the best: the worst governs. */
const WORST_FIRST: readonly Verdict[] = ['doesNotConform', 'withinError', 'notRead', 'groundNotFinished', 'notInspected', 'noLimit', 'conforms', 'notApplicable']
const SEVERITY = Object.fromEntries(WORST_FIRST.map((verdict, at) => [verdict, at])) as Record<Verdict, number>

/** The worse of two verdicts. */
export function worse(a: Verdict, b: Verdict): Verdict {
  return SEVERITY[a] <= SEVERITY[b] ? a : b
}

export interface CheckSources {
  links: EntryLinks
  threads: ReadingThreads
  slots: WalkSlots
  slotOf: readonly (Slot | null)[]
  judged: readonly (ReadingJudgement | null)[]
  overruled: ReadonlyMap<number, number>
  /** Positions of corrections and of set-asides that count. */
  corrections: readonly number[]
  asides: readonly number[]
  /** Slots that a correction disturbs. */
  disturbed: (correction: AnyEntry) => readonly Slot[]
  carried: CarriedOver
  deficiencies: readonly DeficiencyOutcome[]
}

/** The outcome of each slot, in the order of the slots. */
export function checkOutcomes(sources: CheckSources): CheckOutcome[] {
  const { slots, links, threads, asides, corrections, disturbed, deficiencies } = sources
  for (const at of asides) {
    if (links.counts[at] === 0 || threads.replaced[at] === 1) continue
    const { element, check, place } = links.entries[at]!.envelope
    for (const slot of slots.of(element!, check)) {
      if (slot.face !== null && place?.face && place.face !== slot.face) continue
      slot.asides.push(at)
      slot.spoken ||= check !== null
    }
  }
  const disturbedBy = new Map<Slot, number[]>()
  for (const at of corrections) {
    for (const slot of disturbed(links.entries[at]!)) {
      disturbedBy.set(slot, [...disturbedBy.get(slot) ?? [], at])
      slot.spoken ||= links.entries[at]!.envelope.element === slot.element
    }
  }
  const found = new Map<Slot, DeficiencyOutcome[]>()
  for (const one of deficiencies) {
    const at = links.position.get(one.id)
    const slot = (at === undefined ? null : sources.slotOf[at]) ?? slots.of(one.element, one.check)[0]
    if (slot) found.set(slot, [...found.get(slot) ?? [], one])
  }
  return slots.all.map(slot => checkOutcome(slot, disturbedBy.get(slot) ?? [], found.get(slot) ?? [], sources))
}

const NOBODY: string[] = []

function checkOutcome(slot: Slot, disturbing: readonly number[], deficiencies: readonly DeficiencyOutcome[], sources: CheckSources): CheckOutcome {
  const { links, threads, carried, overruled } = sources
  const standing: number[] = []
  let erased = false
  for (const at of slot.readings) {
    if (isHead(links, threads, at)) standing.push(at)
    else if (links.entries[at]!.payload === null && threads.replaced[at] === 0 && threads.reread[at] === 0 && threads.voided[at] === 0) erased = true
  }
  const heads = standing.length === 0 ? [] : headsOf(slot, standing, sources)
  const uncovered = disturbing.filter(at => !isCovered(slot, at, standing, sources))
  const open = deficiencies.some(one => !isEnded(one))
  const setAside = asideOf(slot, sources)
  const baysUnread = slot.check.answeredFor === 'bay' ? missingBays(slot, heads) : 0
  const baysMissing = baysUnread === 0 ? 0 : missingBays(slot, heads, asidePlaces(slot, setAside, links))

  let verdict: Verdict = 'notRead'
  const counted = overruled.size === 0 ? heads[0] : heads.find(head => head.overruledBy === null)
  if (counted) verdict = counted.verdict
  else if (setAside) verdict = setAside.as
  // A bay that was set aside is part of the word on a check that wants every bay.
  if (counted && setAside && baysUnread > 0) verdict = worse(verdict, setAside.as)
  if (baysMissing > 0) verdict = worse(verdict, 'notRead')
  if (open) verdict = 'doesNotConform'
  return {
    element: slot.element,
    check: slot.check.id,
    face: slot.face,
    verdict,
    settled: deficiencies.length > 0 && !open,
    readAgain: (uncovered.length > 0 && heads.length > 0) || erased,
    heads,
    governs: counted?.entry ?? null,
    earlier: standing.length === slot.readings.length ? NOBODY.slice() : inOrder(links, slot.readings.filter(at => !standing.includes(at) && !carried.gone.has(links.entries[at]!.envelope.id))).map(at => links.entries[at]!.envelope.id),
    setAside,
    disturbedBy: uncovered.length === 0 ? NOBODY.slice() : uncovered.map(at => links.entries[at]!.envelope.id).sort(),
    baysMissing,
  }
}

/** The newest words at each place, worst first; sorts `standing` likewise. */
function headsOf(slot: Slot, standing: number[], { links, judged, overruled }: CheckSources): Head[] {
  const { entries } = links
  let alike = true
  if (standing.length > 1) {
    const first = judged[standing[0]!]!
    for (const at of standing) alike &&= judged[at]!.verdict === first.verdict
    standing.sort((a, b) => {
      const one = judged[a]!
      const other = judged[b]!
      return (alike ? 0 : SEVERITY[one.verdict] - SEVERITY[other.verdict]) || (one.margin === other.margin ? 0 : (one.margin ?? Infinity) - (other.margin ?? Infinity)) || (entries[a]!.digest < entries[b]!.digest ? -1 : 1)
    })
  }
  const heads: Head[] = []
  for (const at of standing) {
    const { envelope, payload } = entries[at]!
    const { verdict, margin, limit, otherSystemDiffers } = judged[at]!
    const by = overruled.size === 0 ? undefined : overruled.get(at)
    heads.push({
      entry: envelope.id,
      place: envelope.place,
      value: (payload as PayloadOf<'reading'>).value,
      verdict, margin, limit, otherSystemDiffers,
      author: envelope.author,
      madeAt: envelope.madeAt,
      disagreesWith: [],
      overruledBy: by === undefined ? null : entries[by]!.envelope.id,
    })
  }
  // What comes to the same does not disagree.
  if (!alike) disagreements(slot, heads)
  return heads
}

/** Only readings at the same place can disagree, so only those of one bay and face are held against one another. */
function disagreements(slot: Slot, heads: readonly Head[]): void {
  const groups = new Map<string, Head[]>()
  for (const head of heads) {
    if (head.overruledBy !== null) continue
    const key = `${head.place?.face ?? ''} ${head.place?.bay ?? ''}`
    const group = groups.get(key)
    if (group) group.push(head)
    else groups.set(key, [head])
  }
  for (const group of groups.values()) {
    for (const [at, one] of group.entries()) {
      for (const other of group.slice(at + 1)) {
        if (one.verdict === other.verdict || !samePlace(one.place, other.place, slot.check.placeTolerance, slot.length)) continue
        one.disagreesWith.push(other.entry)
        other.disagreesWith.push(one.entry)
      }
    }
  }
  for (const head of heads) head.disagreesWith.sort()
}

/** Whether a reading looked at a correction that disturbed the slot; where each bay is answered for itself, a reading of each bay. */
function isCovered(slot: Slot, correction: number, standing: readonly number[], { links, threads }: CheckSources): boolean {
  const word = new Set([correction])
  for (const at of word) for (const earlier of links.replaces[at]!) word.add(earlier)
  // One that was read again since did look, all the same; one that was entered in error did not.
  const after = slot.readings.filter((at) => {
    const looked = threads.looked.get(at)
    return looked !== undefined && threads.voided[at] === 0 && threads.replaced[at] === 0 && [...word].some(one => looked.has(one))
  })
  if (after.length === 0 || slot.check.answeredFor !== 'bay') return after.length > 0
  const placeOf = (at: number) => links.entries[at]!.envelope.place
  const seen = new Set(after.map(at => placeOf(at)?.bay ?? null))
  return standing.every(at => seen.has(placeOf(at)?.bay ?? null)) || after.some(at => isOfAllBays(placeOf(at), links.entries[at]!.payload as PayloadOf<'reading'>))
}

/** A look that names no bay and no distance is of the element as a whole. */
function isOfAllBays(place: Place | null, { value }: Pick<PayloadOf<'reading'>, 'value'>): boolean {
  return value.method === 'look' && (place?.bay ?? null) === null && (place?.from ?? null) === null
}

/** How many bays have no reading, nor one of the set-asides. */
function missingBays(slot: Slot, heads: readonly Head[], asides: readonly (Place | null)[] = []): number {
  if (slot.bays === 1 ? heads.length > 0 : heads.some(head => isOfAllBays(head.place, head))) return 0
  if (asides.some(place => (place?.bay ?? null) === null)) return 0
  const bays = new Set([...heads.map(head => head.place), ...asides].map(place => place?.bay ?? 0))
  let missing = slot.bays
  for (const bay of bays) if (bay >= 1 && bay <= slot.bays) missing--
  return missing
}

/** Places of the set-asides of a slot; one that an earlier round left is of all that is not read. */
function asidePlaces(slot: Slot, setAside: CheckOutcome['setAside'], links: EntryLinks): (Place | null)[] {
  return slot.asides.length > 0 ? slot.asides.map(at => links.entries[at]!.envelope.place) : setAside ? [null] : []
}

/** Of several, not inspected is worse than not applicable. */
function asideOf(slot: Slot, { links, carried }: CheckSources): CheckOutcome['setAside'] {
  const said = slot.asides.flatMap((at) => {
    const { envelope, payload, digest } = links.entries[at]! as Extract<AnyEntry, { envelope: { kind: 'setAside' } }>
    return payload === null ? [] : [{ entry: envelope.id, as: payload.as, why: payload.why, digest }]
  }).sort((a, b) => SEVERITY[a.as] - SEVERITY[b.as] || (a.digest < b.digest ? -1 : 1))
  if (said[0]) return { entry: said[0].entry, as: said[0].as, why: said[0].why }
  return carried.asides.find(one => one.element === slot.element && one.check === slot.check.id && one.face === slot.face)?.setAside ?? null
}
