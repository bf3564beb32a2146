import type { JobInput } from '../../../shared/api/job'
import * as jobs from '../../database/queries/job'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { readBuiltIn } from '../checklist/readBuiltIn'
import { Failure, notFound } from '../failure'

function checkChecklists(ids: string[]): void {
  const known = new Set(readBuiltIn().map(list => list.id))
  ids.forEach((id, at) => { if (!known.has(id)) throw new Failure('invalid', 'This checklist is not known here.', [{ pointer: `/checklists/${at}`, code: 'unknown', detail: 'This checklist is not known here. Choose one of the list.' }]) })
}

/** Makes a job at a site. The id comes from the caller, so that sending it twice makes one job. */
export async function createJob(who: Session & { accountId: string }, input: JobInput): Promise<{ id: string, number: number }> {
  checkChecklists(input.checklists)
  return withSession(who, async (tx) => {
    const before = await jobs.jobNumber(tx, input.id)
    if (before) return { id: input.id, number: before }
    const site = await jobs.siteOfJob(tx, input.siteId)
    if (!site) throw new Failure('invalid', 'Choose a site of this organisation.', [{ pointer: '/siteId', code: 'unknown', detail: 'Choose a site of this organisation.' }])
    const number = await jobs.insertJob(tx, input, site, who.accountId)
    await jobs.replaceGiven(tx, input.id, input.given)
    return { id: input.id, number }
  })
}

/** Changes a job's particulars and whom it is given to. */
export async function changeJob(who: Session, jobId: string, input: Omit<JobInput, 'id' | 'siteId'>): Promise<void> {
  checkChecklists(input.checklists)
  await withSession(who, async (tx) => {
    if (!await jobs.updateJob(tx, jobId, input)) throw notFound('job')
    await jobs.replaceGiven(tx, jobId, input.given)
  })
}
