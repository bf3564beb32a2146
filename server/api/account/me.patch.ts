import { profileSchema } from '#shared/api/account'
import { defineRoute } from '../../http/defineRoute'
import { changeProfile } from '../../services/account/changeProfile'

/** Changes the person's own name or language. */
export default defineRoute({ permission: 'account.own', body: profileSchema }, async ({ session, body }) => {
  await changeProfile(session.accountId, body)
  return { changed: true }
})
