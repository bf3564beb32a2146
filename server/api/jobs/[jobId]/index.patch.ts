import { jobChangeSchema, jobIdSchema } from '#shared/api/job'
import { defineRoute } from '../../../http/defineRoute'
import { changeJob } from '../../../services/job/saveJob'

/** Changes a job's particulars and whom it is given to. */
export default defineRoute({ permission: 'job.write', params: jobIdSchema, body: jobChangeSchema }, async ({ session, params, body }) => {
  await changeJob(session, params.jobId, body)
  return { changed: true }
})
