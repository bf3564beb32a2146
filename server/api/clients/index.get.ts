import { defineRoute } from '../../http/defineRoute'
import { listClients } from '../../services/site/keepSites'

/** Lists the organisation's clients with their contacts and sites. */
export default defineRoute({ permission: 'client.read' }, ({ session }) => listClients(session))
