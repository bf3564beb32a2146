import type { JobListQuery, JobPage, JobRow } from '../../../shared/api/job'
import { jobCode } from '../../../shared/api/job'
import * as jobs from '../../database/queries/job'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { fromPlace } from '../fromPlace'

const toRow = ({ organisationCode, key: _, ...row }: jobs.JobListRow): JobRow => {
  const strip = 'elements' in row.strip ? row.strip : null
  return { ...row, code: jobCode(organisationCode, row.number), strip, length: strip?.elements.reduce((sum, element) => sum + element.length, 0) ?? 0 }
}

/** One page of the jobs list, and how many each filter holds. */
export async function listJobs(who: Session, query: JobListQuery): Promise<JobPage> {
  return withSession(who, async (tx) => {
    const rows = await fromPlace(query.after, jobs.listJobs(tx, query))
    const page = rows.slice(0, query.most)
    const last = page.at(-1)
    return { rows: page.map(toRow), next: rows.length > query.most && last ? `${last.id}.${last.key}` : null, counts: await jobs.countJobs(tx) }
  })
}
