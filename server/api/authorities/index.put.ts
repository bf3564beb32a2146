import { authorityInputSchema } from '#shared/api/site'
import { defineRoute } from '../../http/defineRoute'
import { putAuthority } from '../../services/site/keepSites'

/** Adds an authority. */
export default defineRoute({ permission: 'numbers.write', body: authorityInputSchema }, async ({ session, body }) => {
  await putAuthority(session, body)
  return { id: body.id }
})
