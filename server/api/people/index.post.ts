import { setResponseStatus } from 'h3'
import { invitationSchema } from '#shared/api/account'
import { defineRoute } from '../../http/defineRoute'
import { limitTries } from '../../http/limitTries'
import { invite } from '../../services/account/keepPeople'

/** Invites a person by mail. */
export default defineRoute({ permission: 'people.write', body: invitationSchema }, async ({ event, session, body }) => {
  await limitTries('invite', session.organisationId!, 60, 3600)
  await invite({ ...session, organisationId: session.organisationId! }, body)
  setResponseStatus(event, 202)
  return { invited: body.email }
})
