import { jobIdSchema } from '#shared/api/job'
import { defineRoute } from '../../../http/defineRoute'
import { readJob } from '../../../services/job/readJob'

/** Everything that the job's page shows. */
export default defineRoute({ permission: 'job.read', params: jobIdSchema }, ({ session, params }) => readJob(session, params.jobId))
