import { contactInputSchema, idParamsSchema } from '#shared/api/site'
import { defineRoute } from '../../../http/defineRoute'
import { putContact } from '../../../services/site/keepSites'

/** Writes a contact of a client; a changed address lets go of the account that it had. */
export default defineRoute({ permission: 'client.write', params: idParamsSchema('clientId'), body: contactInputSchema }, async ({ session, params, body }) => {
  await putContact(session, params.clientId!, body)
  return { id: body.id }
})
