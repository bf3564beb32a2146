import { clientInputSchema } from '#shared/api/site'
import { defineRoute } from '../../http/defineRoute'
import { putClient } from '../../services/site/keepSites'

/** Writes a client; the same id again changes it. */
export default defineRoute({ permission: 'client.write', body: clientInputSchema }, async ({ session, body }) => {
  await putClient(session, body)
  return { id: body.id }
})
