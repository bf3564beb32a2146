import { setImmediate } from 'node:timers/promises'
import type { KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { fold } from '../../../shared/round/fold'
import type { LockedRound } from '../../database/queries/entry'
import * as states from '../../database/queries/state'
import type { Tx } from '../../database/withSession'
import { jobSummary } from '../job/jobSummary'
import { heldOutcome, roundFold, type RoundHeld } from './foldRound'

/**
 * Writes the fold's result for lists, in the accepting transaction: round, checks, deficiencies, and what the list of jobs shows. Only what changed is
 * written. What comes after a round was frozen or sealed is late: it is kept, and changes nothing here (null).
 *
 * @param accepted - the entries of this transaction, the newest of the round
 * @param store - writes them; the database does so while they are folded here
 */
export async function keepState(tx: Tx, round: LockedRound, accepted: KeptEntry[], store: () => Promise<void> = async () => undefined): Promise<RoundHeld | null> {
  if (round.state !== 'open') {
    await store()
    return null
  }
  const { entries, bases, options } = await roundFold(tx, round, accepted)
  // Folded again with nothing new (refold): what was kept has been thrown away.
  const before = accepted.length === 0 ? null : heldOutcome(round.id, round.accepted - accepted.length) ?? await states.readOutcome(tx, round.id)
  const [outcome] = await Promise.all([setImmediate().then(() => fold(entries, bases, options)), store()])
  await states.writeOutcome(tx, round.id, round.accepted, outcome)
  await states.writeChecks(tx, round.id, before?.checks ?? [], outcome.checks)
  await states.writeDeficiencies(tx, round.id, round.jobId, before?.deficiencies ?? [], outcome.deficiencies)
  const signatures = entries.filter(entry => isKnown(entry) && entry.envelope.kind === 'signature').length
  await states.writeJobSummary(tx, round.jobId, jobSummary(outcome.line, outcome, signatures))
  return { entries, outcome }
}
