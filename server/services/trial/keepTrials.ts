import type { KeptTrial, TrialInput } from '../../../shared/api/trial'
import { jobNumber } from '../../database/queries/job'
import * as trials from '../../database/queries/trial'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'

/** The trial calculations that were kept with elements of a job, newest first. */
export const readTrials = (who: Session, jobId: string): Promise<KeptTrial[]> => withSession(who, async (tx) => {
  if (await jobNumber(tx, jobId) === undefined) throw notFound('job')
  return trials.trialsOfJob(tx, jobId)
})

/** Keeps a trial calculation with an element of the job. Trials are only ever added: a later one on the same element stands above it. */
export const keepTrial = (who: Session & { accountId: string }, jobId: string, input: TrialInput): Promise<void> => withSession(who, async (tx) => {
  if (await jobNumber(tx, jobId) === undefined) throw notFound('job')
  if (await trials.insertTrial(tx, jobId, input, who.accountId)) return
  // Nothing was added: a repeat of the same one, another one under its id, or an element that is not on this site.
  const kept = (await trials.trialsOfJob(tx, jobId)).find(one => one.id === input.id)
  if (!kept) throw new Failure('invalid', 'Choose the element again: it is not on this job\'s line.', [{ pointer: '/element', code: 'unknown', detail: 'Choose it again.' }])
  if (kept.element !== input.element || trials.asKept(kept.trial) !== trials.asKept(input.trial)) throw new Failure('differs', 'Another trial was kept under this id already. Keep yours once more.')
})
