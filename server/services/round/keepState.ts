import type { KeptEntry } from '../../../shared/entry/entry'
import type { LockedRound } from '../../database/queries/entry'
import * as states from '../../database/queries/state'
import type { Tx } from '../../database/withSession'
import { jobSummary } from '../job/jobSummary'
import { foldRound } from './foldRound'

/**
 * Writes the fold's result for lists, in the accepting transaction: round, checks, deficiencies, and what the list of jobs shows. Only what changed is
 * written. What comes after a round was frozen or sealed is late: it is kept, and changes nothing here. Returns all entries of the round.
 */
export async function keepState(tx: Tx, round: LockedRound, accepted: KeptEntry[]): Promise<KeptEntry[]> {
  if (round.state !== 'open') return []
  const { outcome, line, signatures, entries } = await foldRound(tx, round, accepted)
  const before = await states.readOutcome(tx, round.id)
  await states.writeOutcome(tx, round.id, round.accepted, outcome)
  await states.writeChecks(tx, round.id, before?.checks ?? [], outcome.checks)
  await states.writeDeficiencies(tx, round.id, round.jobId, before?.deficiencies ?? [], outcome.deficiencies)
  await states.writeJobSummary(tx, round.jobId, jobSummary(line, outcome, signatures))
  return entries
}
