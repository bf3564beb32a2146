import type { JobPageOf } from '../../../shared/api/job'
import { jobCode } from '../../../shared/api/job'
import type { Line } from '../../../shared/line/line'
import { readJobRow } from '../../database/queries/job'
import { newestLine } from '../../database/queries/line'
import { recordsOfJob } from '../../database/queries/record'
import { basesOf, devicesOf, newestRound, peopleOf } from '../../database/queries/round'
import { readOutcome } from '../../database/queries/state'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { notFound } from '../failure'
import { readBasis } from '../round/foldRound'

/** Everything that a job's page shows, in one transaction. */
export async function readJob(who: Session, jobId: string): Promise<JobPageOf> {
  return withSession(who, async (tx) => {
    const job = await readJobRow(tx, jobId)
    if (!job) throw notFound('job')
    const { organisationCode, organisationName: _, ...rest } = job
    const drawn = await newestLine(tx, jobId)
    const round = await newestRound(tx, jobId) ?? null
    const basisText = round && (await basesOf(tx, jobId)).find(basis => basis.digest === round.basis)
    const outcome = round && await readOutcome(tx, round.id)
    return {
      job: { ...rest, code: jobCode(organisationCode, job.number) },
      line: outcome?.line ?? (drawn ? JSON.parse(drawn.line) as Line : null),
      lineVersion: drawn?.version ?? 0,
      round,
      basis: basisText ? readBasis(basisText.digest, basisText.text) : null,
      outcome,
      people: await peopleOf(tx),
      devices: round ? await devicesOf(tx, round.id) : [],
      // Crew are sent no records.
      records: who.standing === 'crew' ? [] : await recordsOfJob(tx, jobId),
    }
  })
}
