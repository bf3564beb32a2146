import { defineRoute } from '../../../http/defineRoute'
import { listPortalSites } from '../../../services/portal/readPortal'

/** Sites of which a record was sent to this client, from every contractor. */
export default defineRoute({ permission: 'portal.read' }, ({ session }) => listPortalSites(session))
