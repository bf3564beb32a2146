import { portalSiteParamsSchema } from '#shared/api/portal'
import { defineRoute } from '../../../http/defineRoute'
import { readPortalSite } from '../../../services/portal/readPortal'

/** A site of a client: what is current, what is held out of use, its records, and what is offered for acceptance. */
export default defineRoute({ permission: 'portal.read', params: portalSiteParamsSchema }, ({ session, params }) => readPortalSite(session, params.siteId))
