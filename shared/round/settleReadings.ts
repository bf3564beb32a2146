import type { PayloadOf } from '../entry/entry'
import type { EntryLinks } from './linkEntries'
import type { ReadingJudgement } from './judgeReading'
import { samePlace } from './samePlace'
import type { ReadingThreads } from './threadReadings'
import type { Slot } from './walkSlots'

/** Whether a reading is the newest word at its place. */
export function isHead(links: EntryLinks, threads: ReadingThreads, at: number): boolean {
  return links.counts[at] === 1 && threads.replaced[at] === 0 && threads.reread[at] === 0 && threads.voided[at] === 0 && links.entries[at]!.payload !== null
}

/**
 * Which readings are overruled, and by which settlement. A settlement names the readings that it weighed and the one that stands; it falls when that one is no longer
 * the newest word, it never speaks of a reading that it does not name, and nobody overrules a finding of their own. Settlements that contradict
 * one another leave the disagreement as it was.
 */
export function settleReadings(links: EntryLinks, threads: ReadingThreads, judged: readonly (ReadingJudgement | null)[], slotOf: readonly (Slot | null)[], settlements: readonly number[]): Map<number, number> {
  const { entries, counts, answers, ignored } = links
  const overruled = new Map<number, number>()
  const standing = new Set<number>()
  for (const at of settlements) {
    if (counts[at] === 0 || threads.replaced[at] === 1) continue
    const { envelope, payload, digest } = entries[at]!
    const stands = links.position.get((payload as PayloadOf<'settled'> | null)?.stands ?? '')
    const slot = stands === undefined ? null : slotOf[stands]
    if (stands === undefined || !slot || !isHead(links, threads, stands)) {
      ignored.push({ entry: envelope.id, why: 'fallen' })
      continue
    }
    const weighed = answers[at]!.filter(other => other !== stands && slotOf[other] === slot && isHead(links, threads, other)
      && samePlace(entries[stands]!.envelope.place, entries[other]!.envelope.place, slot.check.placeTolerance, slot.length))
    const own = weighed.filter(other => judged[other]!.verdict === 'doesNotConform' && judged[stands]!.verdict !== 'doesNotConform' && entries[other]!.envelope.author === envelope.author)
    if (own.length > 0) {
      ignored.push({ entry: envelope.id, why: 'ownReading' })
      continue
    }
    standing.add(stands)
    for (const other of weighed) {
      const before = overruled.get(other)
      if (before === undefined || digest < entries[before]!.digest) overruled.set(other, at)
    }
  }
  for (const at of standing) overruled.delete(at)
  return overruled
}
