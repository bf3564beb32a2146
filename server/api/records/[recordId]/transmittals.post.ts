import { setResponseStatus } from 'h3'
import { recordParamsSchema, sendInputSchema } from '#shared/api/record'
import { defineRoute } from '../../../http/defineRoute'
import { sendRecord } from '../../../services/transmittal/sendRecord'

/** Sends a sealed record to contacts of its client. */
export default defineRoute({ permission: 'transmittal.send', params: recordParamsSchema, body: sendInputSchema }, async ({ event, session, params, body }) => {
  setResponseStatus(event, 202)
  return await sendRecord({ ...session, organisationId: session.organisationId! }, params.recordId, body)
})
