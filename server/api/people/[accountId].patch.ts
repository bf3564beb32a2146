import { roleChangeSchema } from '#shared/api/account'
import { idParamsSchema } from '#shared/api/site'
import { defineRoute } from '../../http/defineRoute'
import { changeRole } from '../../services/account/keepPeople'

/** Gives a person another role, or with null ends their part. */
export default defineRoute({ permission: 'people.write', params: idParamsSchema('accountId'), body: roleChangeSchema }, async ({ session, params, body }) => {
  await changeRole({ ...session, organisationId: session.organisationId! }, params.accountId!, body.role)
  return { changed: true }
})
