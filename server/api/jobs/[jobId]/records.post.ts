import { setResponseStatus } from 'h3'
import { jobIdSchema } from '#shared/api/job'
import { sealInputSchema } from '#shared/api/record'
import { defineRoute } from '../../../http/defineRoute'
import { requestSealing } from '../../../services/record/requestSealing'

/** Freezes the signed set and begins to seal it; answers at once, the steps are seen at the record. */
export default defineRoute({ permission: 'record.seal', params: jobIdSchema, body: sealInputSchema }, async ({ event, session, params, body }) => {
  setResponseStatus(event, 202)
  return await requestSealing({ ...session, organisationId: session.organisationId! }, params.jobId, body)
})
