import { jobIdSchema } from '#shared/api/job'
import { defineRoute } from '../../../http/defineRoute'
import { readJobLimits } from '../../../services/question/keepQuestions'

/** Questions of a job, the sheets on which they were put, and what changed or falls due among its numbers. */
export default defineRoute({ permission: 'question.read', params: jobIdSchema }, ({ session, params }) => readJobLimits(session, params.jobId))
