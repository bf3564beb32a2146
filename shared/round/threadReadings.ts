import type { AnyEntry, PayloadOf } from '../entry/entry'
import type { EntryLinks } from './linkEntries'
import type { ReadingJudgement } from './judgeReading'
import { samePlace } from './samePlace'
import type { Slot } from './walkSlots'

/** One finding that did not conform, with all that was said about it. Positions as in {@link EntryLinks}. */
export interface Finding {
  root: number
  /** Readings that do not conform and speak of this finding: the first, and such as replaced it or looked at it again at the same place. */
  members: number[]
  /** Everything else that names a member, corrections among it. */
  words: number[]
  /** Conforming readings that looked at a member and at a correction of it which that member had not seen. */
  rereadBy: number[]
}

/** What readings are to one another. */
export interface ReadingThreads {
  findings: Map<number, Finding>
  /** Findings that a reading which does not conform speaks of. */
  roots: Map<number, readonly number[]>
  /** What a reading looked at, with what the readings that it replaces had looked at. */
  looked: Map<number, ReadonlySet<number>>
  replaced: Uint8Array
  reread: Uint8Array
  voided: Uint8Array
  /** Second persons' words that a reading was entered in error, by reading. */
  voids: Map<number, number[]>
}

export interface ThreadSources {
  links: EntryLinks
  /** Slot and judgement of each reading that counts; null elsewhere. */
  slotOf: readonly (Slot | null)[]
  judged: readonly (ReadingJudgement | null)[]
  /** Whether a correction may change what is read in a slot. */
  touches: (correction: AnyEntry, slot: Slot) => boolean
  /** Findings carried over from an earlier round: readings that begin or continue them, and corrections of them. */
  carried: { roots: ReadonlyMap<number, readonly number[]>, corrections: ReadonlyMap<number, readonly number[]> }
}

/**
 * Follows who looked at what. A reading stands until another replaces it (with a reason, where it did not conform), reads it again after a correction that
 * it had not seen, or a second person says that it was entered in error. Targets stand before those who name them, so one pass forward tells what
 * each reading is about and one pass back tells which readings still stand.
 */
export function threadReadings(sources: ThreadSources): ReadingThreads {
  const { links, judged, carried } = sources
  const size = links.entries.length
  const threads: ReadingThreads = {
    findings: new Map(), roots: new Map(), looked: new Map(), voids: new Map(),
    replaced: new Uint8Array(size), reread: new Uint8Array(size), voided: new Uint8Array(size),
  }
  const linked = new Uint8Array(size)
  for (const at of links.order) linked[at] = 1
  for (let at = 0; at < size; at++) {
    if (linked[at] === 0 && links.counts[at] === 1 && judged[at]?.verdict === 'doesNotConform') join(threads, at, carried.roots.get(at) ?? [at])
  }
  for (const [at, roots] of carried.corrections) for (const root of roots) threads.findings.get(root)?.words.push(at)
  if (links.order.length === 0) return threads
  const rereads = forward(sources, threads)
  backward(sources, threads, rereads)
  return threads
}

function join(threads: ReadingThreads, at: number, roots: readonly number[]): void {
  threads.roots.set(at, roots)
  for (const root of roots) {
    const finding = threads.findings.get(root)
    if (finding) finding.members.push(at)
    else threads.findings.set(root, { root, members: [at], words: [], rereadBy: [] })
  }
}

/** Tells for each reading which earlier ones it reads again. */
function forward({ links, slotOf, judged, touches, carried }: ThreadSources, threads: ReadingThreads): Map<number, number[]> {
  const { entries, counts, answers, replaces, order } = links
  const correctionOf = new Map(carried.corrections)
  /** What a reading looked at, and what those readings had looked at in their turn. */
  const knows = new Map<number, ReadonlySet<number>>()
  const rereads = new Map<number, number[]>()
  const kindOf = (at: number) => entries[at]!.envelope.kind
  const placeOf = (at: number) => entries[at]!.envelope.place
  const bad = (at: number) => judged[at]?.verdict === 'doesNotConform'
  const rootsNamedBy = (at: number) => [...new Set(answers[at]!.flatMap(target => threads.roots.get(target) ?? []))]

  for (const at of order) {
    if (counts[at] === 0) continue
    if (kindOf(at) !== 'reading') {
      const roots = rootsNamedBy(at)
      for (const root of roots) threads.findings.get(root)!.words.push(at)
      if (kindOf(at) === 'correction') correctionOf.set(at, roots)
      if (kindOf(at) === 'enteredInError') {
        const reading = answers[at]!.find(target => kindOf(target) === 'reading')!
        threads.voids.set(reading, [...threads.voids.get(reading) ?? [], at])
      }
      continue
    }
    const slot = slotOf[at]
    if (!slot) continue
    const looked = new Set<number>()
    for (const target of answers[at]!) {
      if (kindOf(target) === 'correction' && !touches(entries[target]!, slot))
        links.refusedLinks.push({ entry: entries[at]!.envelope.id, target: entries[target]!.envelope.id, why: 'doesNotDisturb' })
      else looked.add(target)
    }
    for (const target of replaces[at]!) for (const seen of threads.looked.get(target) ?? []) looked.add(seen)
    threads.looked.set(at, looked)
    knows.set(at, new Set([...looked, ...[...looked].flatMap(other => [...knows.get(other) ?? []])]))

    const same = (other: number) => samePlace(placeOf(at), placeOf(other), slot.check.placeTolerance, slot.length)
    if (bad(at)) {
      const continued = [...looked, ...replaces[at]!].filter(other => bad(other) && (replaces[at]!.includes(other) || same(other)))
      join(threads, at, continued.length === 0 ? [at] : [...new Set(continued.flatMap(other => threads.roots.get(other)!))])
    }
    /** A correction that this reading looked at and the other had not, nor any reading that it came after. */
    const bears = (correction: number, other: number) => {
      const of = correctionOf.get(correction)
      if (of === undefined || knows.get(other)?.has(correction)) return false
      return !bad(other) || threads.roots.get(other)!.some(root => of.includes(root))
    }
    const conforms = judged[at]?.verdict === 'conforms'
    for (const other of looked) {
      if (slotOf[other] !== slot || kindOf(other) !== 'reading' || !(conforms || same(other))) continue
      if (![...looked].some(one => bears(one, other))) continue
      rereads.set(at, [...rereads.get(at) ?? [], other])
      if (conforms) for (const root of threads.roots.get(other) ?? []) threads.findings.get(root)!.rereadBy.push(at)
    }
  }
  return rereads
}

/** Tells which readings stand: whoever names a reading is settled before it. */
function backward({ links, judged }: ThreadSources, threads: ReadingThreads, rereads: ReadonlyMap<number, readonly number[]>): void {
  const { entries, counts, replaces, order, refusedLinks } = links
  const { replaced, reread, voided, voids } = threads
  const stands = (at: number) => replaced[at] === 0 && reread[at] === 0
  for (let next = order.length - 1; next >= 0; next--) {
    const at = order[next]!
    if (counts[at] === 0) continue
    const entry = entries[at]!
    if (entry.envelope.kind === 'reading' && voids.has(at) && stands(at)) {
      voided[at] = 1
      continue
    }
    const again = rereads.get(at) ?? []
    for (const other of again) reread[other] = 1
    for (const other of replaces[at]!) {
      const reason = (entry.payload as PayloadOf<'reading'> | null)?.reason
      if (judged[other]?.verdict === 'doesNotConform' && !reason && !again.includes(other))
        refusedLinks.push({ entry: entry.envelope.id, target: entries[other]!.envelope.id, why: 'noReason' })
      else replaced[other] = 1
    }
  }
  // Readings that name nothing are in no order.
  for (const at of voids.keys()) if (stands(at)) voided[at] = 1
}
