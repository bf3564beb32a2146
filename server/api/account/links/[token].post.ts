import { getRequestIP } from 'h3'
import { redeemSchema, tokenSchema } from '#shared/api/account'
import { defineRoute } from '../../../http/defineRoute'
import { limitTries } from '../../../http/limitTries'
import { giveSession } from '../../../http/session'
import { redeemLink } from '../../../services/account/redeemLink'

/** Redeems a mailed link and opens a session. */
export default defineRoute({ permission: 'public', params: tokenSchema, body: redeemSchema }, async ({ event, params, body }) => {
  await limitTries('link-from', getRequestIP(event) ?? '', 300, 900)
  const { token, recordId } = await redeemLink(params.token, body)
  await giveSession(event, token)
  return { signedIn: true, recordId }
})
