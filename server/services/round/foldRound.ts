import { createHash } from 'node:crypto'
import type { KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { readEntry } from '../../../shared/entry/readEntry'
import type { RoundBasis } from '../../../shared/round/basis'
import type { FoldOptions } from '../../../shared/round/fold'
import { tasksFor } from '../../../shared/round/makeBasis'
import type { RoundOutcome } from '../../../shared/round/outcome'
import type { LockedRound } from '../../database/queries/entry'
import { entriesAfter, erasedCount } from '../../database/queries/entry'
import { basesOf, basisDigestsOf } from '../../database/queries/round'
import { outcomeBefore } from '../../database/queries/state'
import type { Tx } from '../../database/withSession'

const sha256 = (text: string) => createHash('sha256').update(text).digest('hex')

/** What a round's entries come to: parsed, with the fold that is kept of them. */
export interface RoundHeld { entries: KeptEntry[], outcome: RoundOutcome }
/** The rounds in hand, so that a push does not read thousands of texts and the kept fold again. Only a cache: checked against the round's own number. */
const parsed = new Map<string, RoundHeld & { accepted: number }>()
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
  const before = round.accepted - fresh.length
  const kept = parsed.get(round.id)
  // What was erased since, perhaps by another process, moves no number.
  const holds = kept && kept.accepted === before && kept.entries.filter(isErased).length === await erasedCount(tx, round.id)
  const entries = holds ? kept.entries : await readAll(tx, round.id, before)
  return [...entries, ...fresh]
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
export function rememberRound(roundId: string, accepted: number, held: RoundHeld): void {
  parsed.delete(roundId)
  parsed.set(roundId, { accepted, ...held })
  if (parsed.size > ROUNDS_KEPT) parsed.delete(parsed.keys().next().value!)
}

/** The fold that was kept at that number, where this process has it in hand. */
export function heldOutcome(roundId: string, accepted: number): RoundOutcome | null {
  const held = parsed.get(roundId)
  return held?.accepted === accepted ? held.outcome : null
}

/** The bases of a job. Their texts are long and never change: only those that this process has not read yet are fetched. */
async function basesOfJob(tx: Tx, jobId: string): Promise<Map<string, RoundBasis>> {
  const digests = await basisDigestsOf(tx, jobId)
  if (!digests.every(digest => bases.has(digest))) return new Map((await basesOf(tx, jobId)).map(({ digest, text }) => [digest, readBasis(digest, text)]))
  return new Map(digests.map(digest => [digest, bases.get(digest)!]))
}

/** What a fold of this round needs: its entries, the bases that they name, and what it goes on from. */
export async function roundFold(tx: Tx, round: Pick<LockedRound, 'id' | 'jobId' | 'number' | 'accepted' | 'basis'>, fresh: KeptEntry[] = []): Promise<{ entries: KeptEntry[], bases: Map<string, RoundBasis>, options: FoldOptions }> {
  const entries = await entriesOf(tx, round, fresh)
  const bases = await basesOfJob(tx, round.jobId)
  const startsFrom = await outcomeBefore(tx, round.jobId, round.number)
  return { entries, bases, options: { basis: round.basis, startsFrom, tasksFor: (element, basis) => tasksFor(basis, element).tasks } }
}
