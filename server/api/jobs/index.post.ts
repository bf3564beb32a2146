import { setResponseStatus } from 'h3'
import { jobInputSchema } from '#shared/api/job'
import { defineRoute } from '../../http/defineRoute'
import { createJob } from '../../services/job/saveJob'

/** Makes a job at a site; sent again with the same id it is the same job. */
export default defineRoute({ permission: 'job.write', body: jobInputSchema }, ({ event, session, body }) => {
  setResponseStatus(event, 201)
  return createJob(session, body)
})
