import { jobIdSchema } from '#shared/api/job'
import { trialInputSchema } from '#shared/api/trial'
import { defineRoute } from '../../../../http/defineRoute'
import { keepTrial } from '../../../../services/trial/keepTrials'

/** Keeps a trial calculation with an element of this job. */
export default defineRoute({ permission: 'trial.write', params: jobIdSchema, body: trialInputSchema, maxBytes: 60_000 }, async ({ session, params, body }) => {
  await keepTrial(session, params.jobId, body)
  return { id: body.id }
})
