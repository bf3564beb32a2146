import type { KeptEntry, WireEntry } from '../../../shared/entry/entry'
import { isKnown, wireEntrySchema } from '../../../shared/entry/entry'
import type { EntryRefusal } from '../../../shared/entry/entryRefused'
import { entryRefusal } from '../../../shared/entry/entryRefused'
import { checkTargets, ENTRY_RULES, type Target } from '../../../shared/entry/entryRules'
import { readEntry } from '../../../shared/entry/readEntry'
import { may } from '../../../shared/permission/permission'
import type { PushResult } from '../../../shared/sync/sync'
import type { Session, Tx } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import * as entries from '../../database/queries/entry'
import { notFound } from '../failure'
import { rememberRound } from '../round/foldRound'
import { keepState } from '../round/keepState'
import { giveAssigned } from './giveAssigned'
import { signatureRefusal } from './signatureRefusal'
import { sha256 } from './sha256'

/** One entry of a push on its way: its texts, what was read, and what becomes of it. */
interface Offered { wire: WireEntry, entry: KeptEntry | null, result: PushResult }
/** One that may be let in: of this push, or held from an earlier one (which then has no result to tell). */
interface Candidate { wire: WireEntry, entry: KeptEntry, offered: Offered | null }

/**
 * Accepts what a device offers for a round: set union by id and digest. Numbers are given under the round's row lock, so they are gapless and in order of
 * commit; the kept state is folded in the same transaction. Answers one result an entry, in order; a bad entry never holds up a good one.
 *
 * @param who - the person who sends; null account for the program itself, which may send what a client signed
 */
export async function acceptEntries(who: Session, roundId: string, wires: WireEntry[]): Promise<{ accepted: number, results: PushResult[] }> {
  const offered = wires.map(wire => read(wire, who, roundId))
  const twins = pairTwins(offered)
  const { accepted, folded } = await withSession(who, async (tx) => {
    const round = await entries.lockRound(tx, roundId)
    if (!round) throw notFound('round')
    const { fresh, held } = await sort(tx, round, offered.filter(one => one.result.state === 'accepted' && !twins.has(one)))
    const good = await accept(tx, round, fresh, held)
    if (good.length === 0) return { accepted: round.accepted, folded: null }
    const folded = await keepState(tx, round, good.map(one => one.entry), async () => {
      await entries.storeEntries(tx, roundId, round.accepted, good)
      await giveAssigned(tx, who, round.jobId, good.map(one => one.entry))
    })
    return { accepted: round.accepted, folded }
  })
  if (folded) rememberRound(roundId, accepted, folded)
  for (const [one, first] of twins) one.result = first.result.state === 'accepted' ? { ...first.result, state: 'resent' } : first.result
  return { accepted, results: offered.map(one => one.result) }
}

/** The same entry twice in one push has one fate: the second goes with the first. */
function pairTwins(offered: Offered[]): Map<Offered, Offered> {
  const firsts = new Map<string, Offered>()
  const twins = new Map<Offered, Offered>()
  for (const one of offered) {
    if (!one.entry || one.result.state === 'refused') continue
    const first = firsts.get(one.entry.digest)
    if (first) twins.set(one, first)
    else firsts.set(one.entry.digest, one)
  }
  return twins
}

/** What can be said of an entry by itself: readable, of this round, by this person, of a kind that they may write. */
function read(wire: WireEntry, who: Session, roundId: string): Offered {
  const refused = (refusal: EntryRefusal): Offered => ({ wire, entry: null, result: { id: idOf(wire), state: 'refused', number: null, refusal } })
  const length = wireEntrySchema.safeParse(wire)
  if (!length.success) {
    const part = length.error.issues[0]!.path[0] as 'envelope' | 'payload'
    return refused(entryRefusal(part, `/${part}`, length.error.issues[0]!.message))
  }
  const outcome = readEntry(wire, { sha256 })
  if (outcome.state === 'refused') return refused(outcome.refusal)
  const { entry } = outcome
  const { envelope } = entry
  const wrong = envelope.round !== roundId ? '/envelope/round'
    : envelope.organisation !== who.organisationId ? '/envelope/organisation'
      : who.accountId !== null && envelope.author !== who.accountId ? '/envelope/author'
        : who.role !== null && isKnown(entry) && !may(who.role, ENTRY_RULES[entry.envelope.kind].permission) ? '/envelope/kind' : null
  const refusal = wrong ? entryRefusal('notYours', wrong) : signatureRefusal(entry)
  return { wire, entry, result: { id: envelope.id, state: refusal ? 'refused' : 'accepted', number: null, refusal } }
}

function idOf(wire: WireEntry): string | null {
  return /"id":"([0-9a-f-]{36})"/.exec(wire.envelope)?.[1] ?? null
}

/** Sets aside what is here already, and brings what is held of the round: the same again is a resend, the same id with another text is kept apart and shown. Whoever came first stands, also while it is held. */
async function sort(tx: Tx, { id, jobId }: entries.LockedRound, offered: Offered[]): Promise<{ fresh: Candidate[], held: WireEntry[] }> {
  const { here, held } = await entries.entriesHere(tx, id, offered.map(one => one.entry!.envelope.id))
  const fresh: Candidate[] = []
  for (const one of offered) {
    const { envelope, digest } = one.entry!
    const before = here.get(envelope.id)
    if (envelope.job !== jobId) one.result = { ...one.result, state: 'refused', refusal: entryRefusal('notYours', '/envelope/job') }
    else if (before && before.digest !== digest) {
      one.result = { ...one.result, state: 'quarantined' }
      await entries.putAside(tx, one.entry!, one.wire, 'quarantined')
    }
    else if (before && before.number !== null) one.result = { ...one.result, state: 'resent', number: before.number }
    else {
      here.set(envelope.id, { digest, number: null })
      fresh.push({ wire: one.wire, entry: one.entry!, offered: one })
    }
  }
  return { fresh, held }
}

/**
 * Numbers whatever names only what is here, of this push and of what was held, as often as something new lets something in. What still waits is held.
 * Returns what is to be stored, in order.
 */
async function accept(tx: Tx, round: entries.LockedRound, fresh: Candidate[], wiresHeld: WireEntry[]): Promise<Candidate[]> {
  const offeredIds = new Set(fresh.map(one => one.entry.envelope.id))
  const held = wiresHeld.flatMap((wire): Candidate[] => {
    const outcome = readEntry(wire, { sha256 })
    return outcome.state === 'refused' || offeredIds.has(outcome.entry.envelope.id) ? [] : [{ wire, entry: outcome.entry, offered: null }]
  })
  let waiting = [...fresh, ...held]
  const targets = await entries.targetsOf(tx, waiting.flatMap(({ entry: { envelope } }) => [...envelope.answers, ...envelope.replaces]))
  const good: Candidate[] = []
  for (let before = -1; before !== good.length;) {
    before = good.length
    waiting = waiting.filter((one) => {
      const { entry, offered } = one
      const state = isKnown(entry) ? checkTargets(entry, id => targets.get(id)) : { state: 'ok' as const }
      if (state.state === 'waiting') return true
      if (state.state === 'refused') {
        if (offered) offered.result = { ...offered.result, state: 'refused', refusal: state.refusal }
        return false
      }
      entry.number = ++round.accepted
      if (offered) offered.result = { ...offered.result, number: entry.number }
      targets.set(entry.envelope.id, entry.envelope as Target)
      good.push(one)
      return false
    })
  }
  for (const { entry, wire, offered } of waiting) {
    if (!offered) continue
    offered.result = { ...offered.result, state: 'held' }
    await entries.putAside(tx, entry, wire, 'held')
  }
  return good
}
