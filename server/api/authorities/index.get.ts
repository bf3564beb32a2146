import { defineRoute } from '../../http/defineRoute'
import { listAuthorities } from '../../services/site/keepSites'

/** Lists the authorities that the organisation knows. */
export default defineRoute({ permission: 'numbers.read' }, ({ session }) => listAuthorities(session))
