import { getRequestIP } from 'h3'
import { checkParamsSchema } from '#shared/api/check'
import { defineRoute } from '../../http/defineRoute'
import { limitTries } from '../../http/limitTries'
import { checkKey } from '../../services/check/checkRecord'

/** The public check by code or digest: what it is, what became of it, and the proof that it stands in the log. */
export default defineRoute({ permission: 'public', params: checkParamsSchema }, async ({ event, params }) => {
  await limitTries('check', getRequestIP(event, { xForwardedFor: false }) ?? '', 120, 60)
  return checkKey(params.key)
})
