import type { KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { readEntry } from '../../../shared/entry/readEntry'
import type { RoundBasis } from '../../../shared/round/basis'
import type { Folded, FoldOptions } from '../../../shared/round/fold'
import { tasksFor } from '../../../shared/round/makeBasis'
import type { LockedRound } from '../../database/queries/entry'
import { entriesAfter, erasedCount } from '../../database/queries/entry'
import { basesOf, basisDigestsOf } from '../../database/queries/round'
import { outcomeBefore } from '../../database/queries/state'
import type { Tx } from '../../database/withSession'
import { sha256 } from '../entry/sha256'

/**
 * The rounds in hand as they were last accepted by this process, so that a push does not read thousands of texts and fold them again. Only a cache: whoever uses it holds
 * the round's row lock and compares the number, since another process may have accepted meanwhile. Entries change under a number only when one is erased, so
 * how many were is compared as well.
 */
const inHand = new Map<string, { accepted: number, erased: number, folded: Folded }>()
const ROUNDS_KEPT = 24
const bases = new Map<string, RoundBasis>()

/** A basis by its digest: canonical text never changes, so it is parsed once a process. */
export function readBasis(digest: string, text: string): RoundBasis {
  const kept = bases.get(digest)
  if (kept) return kept
  const basis = JSON.parse(text) as RoundBasis
  if (bases.size > 200) bases.clear()
  bases.set(digest, basis)
  return basis
}

/** All entries of a round up to its accepted number, parsed. `fresh` are those that this transaction has just stored. */
export async function entriesOf(tx: Tx, round: { id: string, accepted: number }, fresh: KeptEntry[] = []): Promise<KeptEntry[]> {
  return (await entriesInHand(tx, round, fresh)).entries
}

async function entriesInHand(tx: Tx, round: { id: string, accepted: number }, fresh: KeptEntry[]): Promise<{ held: Folded | null, entries: KeptEntry[] }> {
  const before = round.accepted - fresh.length
  const held = await heldFold(tx, round.id, before)
  return { held, entries: [...held?.entries ?? await readAll(tx, round.id, before), ...fresh] }
}

const isErased = (entry: KeptEntry) => isKnown(entry) ? entry.payload === null : entry.payloadText === ''

async function readAll(tx: Tx, roundId: string, upTo: number): Promise<KeptEntry[]> {
  const rows = upTo > 0 ? await entriesAfter(tx, roundId, 0, upTo) : []
  return rows.map((row) => {
    const read = readEntry(row, { number: row.number, mayBeErased: true, sha256 })
    if (read.state === 'refused') throw new Error(`a stored entry of round ${roundId}, number ${row.number}, cannot be read: ${read.refusal.code}`)
    return read.entry
  })
}

/** Remembers what a committed transaction left behind; after a rollback nothing is remembered and the next one reads again. */
export function rememberRound(roundId: string, accepted: number, folded: Folded): void {
  inHand.delete(roundId)
  inHand.set(roundId, { accepted, erased: folded.entries.filter(isErased).length, folded })
  if (inHand.size > ROUNDS_KEPT) inHand.delete(inHand.keys().next().value!)
}

/** The fold of a round's entries up to that number, where this process has it in hand. */
async function heldFold(tx: Tx, roundId: string, accepted: number): Promise<Folded | null> {
  const held = inHand.get(roundId)
  return held?.accepted === accepted && held.erased === await erasedCount(tx, roundId) ? held.folded : null
}

/** The bases of a job. Their texts are long and never change: only those that this process has not read yet are fetched. */
async function basesOfJob(tx: Tx, jobId: string): Promise<Map<string, RoundBasis>> {
  const digests = await basisDigestsOf(tx, jobId)
  if (!digests.every(digest => bases.has(digest))) return new Map((await basesOf(tx, jobId)).map(({ digest, text }) => [digest, readBasis(digest, text)]))
  return new Map(digests.map(digest => [digest, bases.get(digest)!]))
}

/** What a fold of this round needs: the fold in hand before the fresh ones, its entries, the bases that they name, and what it goes on from. */
export async function roundFold(tx: Tx, round: Pick<LockedRound, 'id' | 'jobId' | 'number' | 'accepted' | 'basis'>, fresh: KeptEntry[] = []): Promise<{ held: Folded | null, entries: KeptEntry[], bases: Map<string, RoundBasis>, options: FoldOptions }> {
  const { held, entries } = await entriesInHand(tx, round, fresh)
  const bases = await basesOfJob(tx, round.jobId)
  const startsFrom = await outcomeBefore(tx, round.jobId, round.number)
  return { held, entries, bases, options: { basis: round.basis, startsFrom, tasksFor: (element, basis) => tasksFor(basis, element).tasks } }
}
