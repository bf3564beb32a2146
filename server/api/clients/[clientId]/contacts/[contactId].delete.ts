import { z } from 'zod'
import { defineRoute } from '../../../../http/defineRoute'
import { endContact } from '../../../../services/site/keepSites'

/** Ends a contact: nothing more is sent there, and its links open nothing. What was sent stays in the delivery log. */
export default defineRoute({ permission: 'client.write', params: z.object({ clientId: z.string().uuid(), contactId: z.string().uuid() }).strict() }, async ({ session, params }) => {
  await endContact(session, params.clientId, params.contactId)
  return { ended: true }
})
