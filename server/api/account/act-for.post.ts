import { actForSchema } from '#shared/api/account'
import { defineRoute } from '../../http/defineRoute'
import { giveSession } from '../../http/session'
import { endSession } from '../../services/account/endSession'
import { openSession } from '../../services/account/signIn'

/** Goes on in another standing or organisation of the same person: a new session takes the place of this one. */
export default defineRoute({ permission: 'account.own', body: actForSchema }, async ({ event, session, body }) => {
  const token = await openSession(session.accountId, body)
  await endSession(session, false)
  await giveSession(event, token)
  return { actingFor: body.organisationId }
})
