import type { AnyEntry, EntryKind, KeptEntry, PayloadOf } from '../entry/entry'
import type { RoundBasis } from './basis'
import { basisInForce } from './basisInForce'
import type { CarriedOver } from './carryOver'
import { carryOver } from './carryOver'
import { checkOutcomes } from './checkOutcomes'
import type { OnceForTheLine } from './elementOutcomes'
import { elementOutcomes } from './elementOutcomes'
import { findDeficiencies } from './findDeficiencies'
import type { ReadingJudgement } from './judgeReading'
import { judgeReading } from './judgeReading'
import type { LineAsBuilt } from './lineAsBuilt'
import { lineAsBuilt, neighboursOf } from './lineAsBuilt'
import type { EntryIndex } from './entryIndex'
import type { EntryLinks } from './linkEntries'
import { linkEntries } from './linkEntries'
import type { CheckOutcome, DeficiencyOutcome, RoundOutcome, Verdict } from './outcome'
import { VERDICTS } from './outcome'
import { isHead, settleReadings } from './settleReadings'
import { threadReadings } from './threadReadings'
import type { Slot, TasksFor } from './walkSlots'
import { WalkSlots } from './walkSlots'

export interface FoldOptions {
  /** Digest of the basis that the round was opened with; used until an entry names one. */
  basis?: string
  /** The sealed outcome of the round before this one, whose readings and deficiencies go on. */
  startsFrom?: RoundOutcome
  /** What is to be checked on an element that an edit of the line brought. */
  tasksFor?: TasksFor
}

/** What is one for the whole round: the basis in force, the line as built, and what stands beside what on it. Only entries of {@link GROUND_KINDS} decide it. */
export interface Ground { force: ReturnType<typeof basisInForce>, built: LineAsBuilt, neighbours: ReadonlyMap<string, readonly string[]> }
export const GROUND_KINDS: readonly EntryKind[] = ['walkOpened', 'basisChanged', 'lineEdit']

/** A fold with what it takes to go on from it ({@link foldOn}). */
export interface Folded {
  entries: readonly KeptEntry[]
  outcome: RoundOutcome
  ground: Ground
  /** How many of the outcome's checks were asked for; those found beside the list come after them. */
  planned: number
  once: OnceForTheLine
  /** How many bases were known, and what it was made with. */
  bases: number
  options: Pick<FoldOptions, 'basis' | 'startsFrom'>
  /** Kept by {@link foldOn} alone. */
  index?: EntryIndex
}

/**
 * What the entries of one round come to, over the basis in force (contracts.md 2). A pure value: the same entries in any order, in any copies, from any devices give
 * the same one; no clock and no order of ids decides anything. An entry of a kind that these rules do not know changes nothing but `unknown`.
 *
 * @param entries - entries of one round, as `readEntry` gave them
 * @param bases - the bases that the entries name, by digest
 * @throws {RoundError} noBasis, unknownBasis
 */
export function fold(entries: readonly KeptEntry[], bases: ReadonlyMap<string, RoundBasis>, options: FoldOptions = {}): RoundOutcome {
  return foldWhole(entries, bases, options).outcome
}

/** As {@link fold}, to be gone on with. `part`: only these elements, on the ground of an earlier fold; what is one for the round is not told again. */
export function foldWhole(entries: readonly KeptEntry[], bases: ReadonlyMap<string, RoundBasis>, options: FoldOptions = {}, part?: { ground: Ground, elements: ReadonlySet<string>, once: OnceForTheLine }): Folded {
  const carried = carryOver(options.startsFrom, entries)
  const links = linkEntries(carried.entries.length === 0 ? entries : [...entries, ...carried.entries], carried.settledIds)
  const kinds = byKind(links)
  const ground = part?.ground ?? groundOf(links, kinds, bases, options)
  const { force, built, neighbours } = ground
  const slots = new WalkSlots(force.basis, bases, built, options.tasksFor, part?.elements)
  if (!part) links.ignored.push(...built.ignored)

  const { slotOf, judged, erased } = placeReadings(links, slots, kinds.reading, carried)
  const checkOf = (entry: AnyEntry) => force.basis.checks.find(one => one.id === entry.envelope.check) ?? bases.get(entry.envelope.basis ?? '')?.checks.find(one => one.id === entry.envelope.check)
  /** A correction may change its own check, and what that check disturbs, on its element and beside it. */
  const touches = (correction: AnyEntry, slot: Slot): boolean => {
    const { element, check, id } = correction.envelope
    if (element === slot.element && check === slot.check.id) return true
    if (carried.disturbs.get(id)?.some(one => one.element === slot.element && one.check === slot.check.id)) return true
    return (element === slot.element || (neighbours.get(slot.element)?.includes(element!) ?? false)) && (checkOf(correction)?.disturbs.includes(slot.check.id) ?? false)
  }

  const positionOf = (id: string) => links.position.get(id)!
  const threads = threadReadings({ links, slotOf, judged, touches, carried: {
    roots: new Map([...carried.roots].map(([id, roots]) => [positionOf(id), roots.map(positionOf)])),
    corrections: new Map([...carried.corrections].map(([id, roots]) => [positionOf(id), roots.map(positionOf)])),
  } })
  for (const id of carried.gone) threads.replaced[positionOf(id)] = 1
  const overruled = settleReadings(links, threads, judged, slotOf, kinds.settled)
  const deficiencies = findDeficiencies({ links, threads, slotOf, overruled, carried: new Map([...carried.deficiencies].map(([id, one]) => [positionOf(id), one])) })
  tellFallen(links, kinds, at => isHead(links, threads, at) && judged[at]?.verdict === 'doesNotConform',
    reading => (threads.roots.get(reading) ?? []).every(root => deficiencies.get(root)!.class === 'ownerMayAccept'))

  const corrections = kinds.correction.filter(at => links.counts[at] === 1 && threads.replaced[at] === 0)
  const all = [...deficiencies.values(), ...carried.ended]
  /** What is to be read again after a correction; what an earlier round left to be read again is told by that round. */
  const disturbed = (correction: AnyEntry): Slot[] => {
    const { id, element } = correction.envelope
    const left = carried.disturbs.get(id)
    if (left || carried.corrections.has(id)) return (left ?? []).flatMap(one => slots.of(one.element, one.check).filter(slot => slot.face === one.face))
    return (checkOf(correction)?.disturbs ?? []).flatMap(check => [element!, ...neighbours.get(element!) ?? []].flatMap(one => slots.of(one, check)))
  }
  const checks = checkOutcomes({ links, threads, slots, slotOf, judged, overruled, corrections, disturbed, asides: kinds.setAside, carried, deficiencies: all })
  const found = elementOutcomes(slots, checks, all, part?.once)
  return {
    entries, ground, planned: found.planned, once: found.once, bases: bases.size, options,
    outcome: roundOutcome(ground, {
      elements: found.elements, checks: found.checks, deficiencies: all, waiting: links.waiting, unknown: links.unknown,
      ignored: links.ignored, refusedLinks: links.refusedLinks, erased: erased.map(at => links.entries[at]!.envelope.id),
    }),
  }
}

function groundOf(links: EntryLinks, kinds: ByKind, bases: ReadonlyMap<string, RoundBasis>, options: FoldOptions): Ground {
  const force = basisInForce(links, kinds, bases, options.basis ?? options.startsFrom?.basis)
  const built = lineAsBuilt(force.basis, bases, links, kinds.lineEdit)
  return { force, built, neighbours: neighboursOf(built.line) }
}

/** What was found, put in order and counted. */
export function roundOutcome({ force, built }: Ground, found: Pick<RoundOutcome, 'elements' | 'checks' | 'deficiencies' | 'waiting' | 'unknown' | 'ignored' | 'refusedLinks' | 'erased'>): RoundOutcome {
  const tally = Object.fromEntries(VERDICTS.map(verdict => [verdict, 0])) as Record<Verdict, number>
  for (const check of found.checks) tally[check.verdict]++
  return {
    rules: force.basis.rules,
    basis: force.digest,
    elements: found.elements,
    checks: found.checks,
    deficiencies: inWalkingOrder(found.deficiencies, found.checks),
    waiting: found.waiting,
    unknown: found.unknown,
    ignored: found.ignored.sort((a, b) => compare(a.entry, b.entry) || compare(a.why, b.why)),
    refusedLinks: found.refusedLinks.sort((a, b) => compare(a.entry, b.entry) || compare(a.target, b.target) || compare(a.why, b.why)),
    erased: found.erased.sort(),
    conflicts: [...force.conflicts, ...built.conflicts],
    line: built.line,
    tally,
  }
}

function compare<T extends string | number>(a: T, b: T): number {
  return a < b ? -1 : a > b ? 1 : 0
}

/** Deficiencies along the walk; within a check by tag. Those whose check is no longer shown come last. */
function inWalkingOrder(deficiencies: readonly DeficiencyOutcome[], checks: readonly CheckOutcome[]): DeficiencyOutcome[] {
  const turns = new Map<string, Map<string, number>>()
  for (const [turn, { element, check }] of checks.entries()) {
    const onElement = turns.get(element)
    if (onElement) onElement.set(check, turn)
    else turns.set(element, new Map([[check, turn]]))
  }
  return deficiencies.map(one => ({ one, turn: turns.get(one.element)?.get(one.check) ?? Infinity }))
    .sort((a, b) => compare(a.turn, b.turn) || compare(a.one.tag, b.one.tag) || compare(a.one.id, b.one.id))
    .map(({ one }) => one)
}

const KINDS = ['walkOpened', 'basisChanged', 'reading', 'setAside', 'correction', 'settled', 'lineEdit', 'deviationAccepted', 'decided', 'referred'] as const
type ByKind = Record<(typeof KINDS)[number], number[]>

function byKind(links: EntryLinks): ByKind {
  const kinds = Object.fromEntries(KINDS.map(kind => [kind, []])) as unknown as ByKind
  for (let at = 0; at < links.entries.length; at++) {
    const list = kinds[links.entries[at]!.envelope.kind as keyof ByKind]
    if (list !== undefined) list.push(at)
  }
  return kinds
}

/** Finds the slot of each reading that counts and what the reading comes to there. */
function placeReadings(links: EntryLinks, slots: WalkSlots, readings: readonly number[], carried: CarriedOver) {
  const { entries, counts, ignored } = links
  const slotOf: (Slot | null)[] = new Array(entries.length).fill(null)
  const judged: (ReadingJudgement | null)[] = new Array(entries.length).fill(null)
  const erased: number[] = []
  const beside: number[] = []
  const put = (at: number, slot: Slot) => {
    const { envelope, payload } = entries[at]! as Extract<AnyEntry, { envelope: { kind: 'reading' } }>
    slotOf[at] = slot
    if (payload === null) {
      // What was carried over without its value is known not to conform.
      if (carried.gone.has(envelope.id)) judged[at] = { verdict: 'doesNotConform', margin: null, limit: null, otherSystemDiffers: false }
      else erased.push(at)
      slot.readings.push(at)
      return
    }
    const { value } = payload
    const finding = value.method === 'look' && value.found === 'finding'
    // A finding counts however it was entered; that all is well must have been entered as the check asks.
    const why = finding ? null : value.method !== slot.check.method ? 'methodDiffers' as const : payload.group !== undefined && !slot.check.group ? 'groupNotAllowed' as const : null
    if (why !== null) {
      counts[at] = 0
      slotOf[at] = null
      ignored.push({ entry: envelope.id, why })
      return
    }
    judged[at] = judgeReading(payload, slot.check, slot.keys, slot.limits)
    slot.readings.push(at)
  }
  for (const at of readings) {
    if (counts[at] === 0) continue
    const slot = slots.planned(entries[at]!)
    if (slot) put(at, slot)
    else beside.push(at)
  }
  const basisOf = (at: number) => entries[at]!.envelope.basis ?? ''
  for (const at of beside.sort((a, b) => compare(basisOf(a), basisOf(b)) || compare(entries[a]!.digest, entries[b]!.digest))) {
    const slot = slots.beside(entries[at]!)
    if (slot) put(at, slot)
    else {
      counts[at] = 0
      ignored.push({ entry: entries[at]!.envelope.id, why: 'notInBasis' })
    }
  }
  return { slotOf, judged, erased }
}

/** Words that end a deficiency name one reading; they come to nothing when it is no longer the newest word, or when its class does not allow them. */
function tellFallen(links: EntryLinks, kinds: ByKind, stands: (reading: number) => boolean, mayBeAccepted: (reading: number) => boolean): void {
  const { entries, counts, answers, ignored } = links
  for (const at of [...kinds.deviationAccepted, ...kinds.decided, ...kinds.referred]) {
    if (counts[at] === 0) continue
    const { envelope, payload } = entries[at]!
    const reading = answers[at]!.find(target => entries[target]!.envelope.kind === 'reading')!
    if (!stands(reading)) ignored.push({ entry: envelope.id, why: 'fallen' })
    else if (envelope.kind === 'deviationAccepted' && (payload as PayloadOf<'deviationAccepted'> | null)?.accepted && !mayBeAccepted(reading)) ignored.push({ entry: envelope.id, why: 'classDoesNotAllow' })
  }
}
