import { getRequestIP, setResponseStatus } from 'h3'
import { resetRequestSchema } from '#shared/api/account'
import { defineRoute } from '../../http/defineRoute'
import { limitTries } from '../../http/limitTries'
import { requestReset } from '../../services/account/requestReset'

/** Asks for a link to set a new password. The answer never tells whether there is such an account. */
export default defineRoute({ permission: 'public', body: resetRequestSchema }, async ({ event, body }) => {
  await limitTries('reset-from', getRequestIP(event) ?? '', 30, 3600)
  await limitTries('reset', body.email, 5, 3600)
  await requestReset(body.email)
  setResponseStatus(event, 202)
  return { sent: 'if there is such an account' }
})
