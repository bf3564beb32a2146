import { jobListSchema } from '#shared/api/job'
import { defineRoute } from '../../http/defineRoute'
import { listJobs } from '../../services/job/listJobs'

/** Lists the jobs that the person may see, a page at a time. */
export default defineRoute({ permission: 'job.read', query: jobListSchema }, ({ session, query }) => listJobs(session, query))
