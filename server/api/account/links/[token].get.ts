import { getRequestIP } from 'h3'
import { tokenSchema } from '#shared/api/account'
import { defineRoute } from '../../../http/defineRoute'
import { limitTries } from '../../../http/limitTries'
import { readLink } from '../../../services/account/redeemLink'

/** What a mailed link is for; changes nothing. */
export default defineRoute({ permission: 'public', params: tokenSchema }, async ({ event, params }) => {
  await limitTries('link-from', getRequestIP(event) ?? '', 300, 900)
  return await readLink(params.token)
})
