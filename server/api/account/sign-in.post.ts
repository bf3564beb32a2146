import { getRequestIP } from 'h3'
import { signInSchema } from '#shared/api/account'
import { defineRoute } from '../../http/defineRoute'
import { limitTries } from '../../http/limitTries'
import { giveSession } from '../../http/session'
import { signIn } from '../../services/account/signIn'

/** Signs in by e-mail and password. Ten tries an address in a quarter of an hour; a right one clears the count. */
export default defineRoute({ permission: 'public', body: signInSchema }, async ({ event, body }) => {
  const address = getRequestIP(event, { xForwardedFor: false }) ?? ''
  await limitTries('sign-in-from', address, 100, 900)
  const tries = await limitTries('sign-in', body.email, 10, 900)
  const { token } = await signIn(body.email, body.password)
  await tries.delete(body.email)
  await giveSession(event, token)
  return { signedIn: true }
})
