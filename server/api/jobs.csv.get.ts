import { setResponseHeaders } from 'h3'
import { jobListSchema } from '#shared/api/job'
import { defineRoute } from '../http/defineRoute'
import { exportJobs } from '../services/job/exportJobs'

/** The jobs list as a table file, as it is filtered and sorted on the screen, whole. */
export default defineRoute({ permission: 'job.read', query: jobListSchema }, async ({ event, session, query }) => {
  setResponseHeaders(event, { 'content-type': 'text/csv; charset=utf-8', 'content-disposition': 'attachment; filename="jobs.csv"' })
  return await exportJobs(session, query)
})
