import { uuidv7 } from 'uuidv7'
import { holdOf, liftHold, placeHold } from '../../database/queries/erasure'
import { writeAudit } from '../../database/queries/people'
import { jobIsTheirs } from '../../database/queries/photo'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { notFound } from '../failure'

/** Places a hold on a job, so that nothing of it is erased, or lifts it (null). One stands already: it stays as it was placed. */
export async function setHold(who: Session & { accountId: string }, jobId: string, reason: string | null): Promise<{ held: boolean }> {
  return withSession(who, async (tx) => {
    if (!await jobIsTheirs(tx, jobId)) throw notFound('job')
    const stands = await holdOf(tx, jobId) !== null
    if (stands !== (reason !== null)) {
      await (reason === null ? liftHold(tx, jobId, who.accountId) : placeHold(tx, uuidv7(), jobId, reason, who.accountId))
      await writeAudit(tx, uuidv7(), who.accountId, reason === null ? 'holdLifted' : 'holdPlaced', jobId)
    }
    return { held: reason !== null }
  })
}
