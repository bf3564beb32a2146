import { jobIdSchema } from '#shared/api/job'
import { defineRoute } from '../../../../http/defineRoute'
import { readTrials } from '../../../../services/trial/keepTrials'

/** The trial calculations that were kept with elements of this job, newest first. */
export default defineRoute({ permission: 'trial.read', params: jobIdSchema }, ({ session, params }) => readTrials(session, params.jobId))
