import { setResponseStatus } from 'h3'
import { askErasureSchema } from '#shared/api/erasure'
import { jobParamsSchema } from '#shared/sync/sync'
import { defineRoute } from '../../../../http/defineRoute'
import { askErasure } from '../../../../services/erasure/askErasure'

/** Asks that a picture or what an entry says be erased. */
export default defineRoute({ permission: 'erasure.write', params: jobParamsSchema, body: askErasureSchema }, async ({ event, session, params, body }) => {
  const answer = await askErasure(session, params.jobId, body)
  setResponseStatus(event, 201)
  return answer
})
