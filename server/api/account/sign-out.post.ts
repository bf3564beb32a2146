import { z } from 'zod'
import { defineRoute } from '../../http/defineRoute'
import { dropSession } from '../../http/session'
import { endSession } from '../../services/account/endSession'

/** Ends this session, or every session of the person. */
export default defineRoute({ permission: 'account.own', body: z.object({ everywhere: z.boolean().default(false) }).strict() }, async ({ event, session, body }) => {
  await endSession(session, body.everywhere)
  await dropSession(event)
  return { signedOut: true }
})
