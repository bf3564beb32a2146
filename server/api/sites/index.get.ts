import { defineRoute } from '../../http/defineRoute'
import { listSites } from '../../services/site/keepSites'

/** Lists the organisation's sites. */
export default defineRoute({ permission: 'site.read' }, ({ session }) => listSites(session))
