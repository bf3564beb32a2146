import { siteInputSchema } from '#shared/api/site'
import { defineRoute } from '../../http/defineRoute'
import { putSite } from '../../services/site/keepSites'

/** Writes a site; the same id again changes it. */
export default defineRoute({ permission: 'site.write', body: siteInputSchema }, async ({ session, body }) => {
  await putSite(session, body)
  return { id: body.id }
})
