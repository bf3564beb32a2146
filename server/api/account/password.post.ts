import { passwordChangeSchema } from '#shared/api/account'
import { defineRoute } from '../../http/defineRoute'
import { limitTries } from '../../http/limitTries'
import { giveSession } from '../../http/session'
import { changePassword } from '../../services/account/changeProfile'
import { openSession } from '../../services/account/signIn'

/** Sets a new password and signs out everywhere else. */
export default defineRoute({ permission: 'account.own', body: passwordChangeSchema }, async ({ event, session, body }) => {
  await limitTries('sign-in', session.email, 10, 900)
  await changePassword(session, body.now, body.next)
  await giveSession(event, await openSession(session.accountId, { standing: session.standing, organisationId: session.organisationId }))
  return { changed: true }
})
