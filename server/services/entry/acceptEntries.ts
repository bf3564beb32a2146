import { createHash } from 'node:crypto'
import type { AnyEntry, KeptEntry, WireEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { entryRefusal } from '../../../shared/entry/entryRefused'
import { checkTargets, ENTRY_RULES, type Target } from '../../../shared/entry/entryRules'
import { readEntry } from '../../../shared/entry/readEntry'
import { may } from '../../../shared/permission/permission'
import type { PushResult } from '../../../shared/sync/sync'
import type { Session, Tx } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import * as entries from '../../database/queries/entry'
import { notFound } from '../failure'
import { rememberEntries } from '../round/foldRound'
import { keepState } from '../round/keepState'

const sha256 = (text: string) => createHash('sha256').update(text).digest('hex')

/** One entry of a push on its way: its texts, what was read, and what becomes of it. */
interface Offered { wire: WireEntry, entry: KeptEntry | null, result: PushResult }

/**
 * Accepts what a device offers for a round: set union by id and digest. Numbers are given under the round's row lock, so they are gapless and in order of
 * commit; the kept state is folded in the same transaction. Answers one result an entry, in order; a bad entry never holds up a good one.
 *
 * @param who - the person who sends; null account for the program itself, which may send what a client signed
 */
export async function acceptEntries(who: Session, roundId: string, wires: WireEntry[]): Promise<{ accepted: number, results: PushResult[] }> {
  const offered = wires.map(wire => read(wire, who, roundId))
  const { accepted, all } = await withSession(who, async (tx) => {
    const round = await entries.lockRound(tx, roundId)
    if (!round) throw notFound('round')
    const fresh = await sort(tx, round.jobId, offered.filter(one => one.result.state === 'accepted'))
    const known = await accept(tx, who, round, fresh)
    const accepted = await tryHeld(tx, who, round, known)
    if (accepted.length === 0) return { accepted: round.accepted, all: [] }
    await entries.setAccepted(tx, roundId, round.accepted)
    return { accepted: round.accepted, all: await keepState(tx, round, accepted) }
  })
  if (all.length > 0) rememberEntries(roundId, accepted, all)
  return { accepted, results: offered.map(one => one.result) }
}

/** What can be said of an entry by itself: readable, of this round, by this person, of a kind that they may write. */
function read(wire: WireEntry, who: Session, roundId: string): Offered {
  const outcome = readEntry(wire, { sha256 })
  if (outcome.state === 'refused') return { wire, entry: null, result: { id: idOf(wire), state: 'refused', number: null, refusal: outcome.refusal } }
  const { entry } = outcome
  const { envelope } = entry
  const wrong = envelope.round !== roundId ? '/envelope/round'
    : envelope.organisation !== who.organisationId ? '/envelope/organisation'
      : who.accountId !== null && envelope.author !== who.accountId ? '/envelope/author'
        : who.role !== null && isKnown(entry) && !may(who.role, ENTRY_RULES[entry.envelope.kind].permission) ? '/envelope/kind' : null
  const refusal = wrong ? entryRefusal('notYours', wrong) : null
  return { wire, entry, result: { id: envelope.id, state: refusal ? 'refused' : 'accepted', number: null, refusal } }
}

function idOf(wire: WireEntry): string | null {
  return /"id":"([0-9a-f-]{36})"/.exec(wire.envelope)?.[1] ?? null
}

/** Sets aside what is here already: the same again is a resend, the same id with another text is kept apart and shown. */
async function sort(tx: Tx, jobId: string, offered: Offered[]): Promise<Offered[]> {
  const here = await entries.digestsOf(tx, offered.map(one => one.entry!.envelope.id))
  const fresh: Offered[] = []
  for (const one of offered) {
    const { envelope, digest } = one.entry!
    const before = here.get(envelope.id)
    if (envelope.job !== jobId) one.result = { ...one.result, state: 'refused', refusal: entryRefusal('notYours', '/envelope/job') }
    else if (before && before.digest === digest) one.result = { ...one.result, state: 'resent', number: before.number }
    else if (before) {
      one.result = { ...one.result, state: 'quarantined' }
      await entries.putAside(tx, one.entry!, one.wire, 'quarantined')
    }
    else {
      here.set(envelope.id, { digest, number: null })
      fresh.push(one)
    }
  }
  return fresh
}

/** Numbers and stores the entries whose targets are all here; holds those that wait. Returns what was accepted. */
async function accept(tx: Tx, who: Session, round: entries.LockedRound, fresh: Offered[]): Promise<{ entry: KeptEntry, wire: WireEntry }[]> {
  const named = fresh.flatMap(one => [...one.entry!.envelope.answers, ...one.entry!.envelope.replaces])
  const targets = await entries.targetsOf(tx, named)
  const good: Offered[] = []
  for (const one of fresh) {
    const entry = one.entry!
    const state = isKnown(entry) ? checkTargets(entry, id => targets.get(id)) : { state: 'ok' as const }
    if (state.state === 'refused') one.result = { ...one.result, state: 'refused', refusal: state.refusal }
    else if (state.state === 'waiting') {
      one.result = { ...one.result, state: 'held' }
      await entries.putAside(tx, entry, one.wire, 'held')
    }
    else {
      one.result = { ...one.result, number: ++round.accepted }
      entry.number = round.accepted
      targets.set(entry.envelope.id, entry.envelope as Target)
      good.push(one)
    }
  }
  await entries.insertEntries(tx, good.map(one => ({ entry: one.entry!, wire: one.wire })))
  return good.map(one => ({ entry: one.entry!, wire: one.wire }))
}

/** Tries again what was held, as often as something new let something in. */
async function tryHeld(tx: Tx, who: Session, round: entries.LockedRound, known: { entry: KeptEntry, wire: WireEntry }[]): Promise<KeptEntry[]> {
  const all = known.map(one => one.entry)
  for (let news = known; news.length > 0;) {
    const held = await entries.heldOf(tx, round.id)
    if (held.length === 0) break
    const readable = held.map(wire => ({ wire, outcome: readEntry(wire, { sha256 }) })).filter(one => one.outcome.state !== 'refused')
    const targets = await entries.targetsOf(tx, readable.flatMap(one => one.outcome.state === 'known' ? [...one.outcome.entry.envelope.answers, ...one.outcome.entry.envelope.replaces] : []))
    const ready = readable.filter(one => one.outcome.state === 'known' && checkTargets(one.outcome.entry as AnyEntry, id => targets.get(id)).state === 'ok')
    news = ready.map((one) => {
      const entry = (one.outcome as { entry: KeptEntry }).entry
      entry.number = ++round.accepted
      return { entry, wire: one.wire }
    })
    await entries.insertEntries(tx, news)
    await entries.dropAside(tx, news.map(one => one.entry))
    all.push(...news.map(one => one.entry))
  }
  return all
}
