import { setResponseStatus } from 'h3'
import { acceptanceInputSchema } from '#shared/api/portal'
import { recordParamsSchema } from '#shared/api/record'
import { defineRoute } from '../../../http/defineRoute'
import { signAcceptance } from '../../../services/acceptance/signAcceptance'

/** A client signs about a record: a receipt, the work as a whole, or its answer to a deviation. Strokes may be long. */
export default defineRoute({ permission: 'acceptance.write', params: recordParamsSchema, body: acceptanceInputSchema, maxBytes: 2_500_000 }, async ({ event, session, params, body }) => {
  const answer = await signAcceptance(session, params.recordId, body)
  setResponseStatus(event, 201)
  return answer
})
