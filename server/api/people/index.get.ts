import { defineRoute } from '../../http/defineRoute'
import { listPeople } from '../../services/account/keepPeople'

/** Lists the people of the organisation with their roles. */
export default defineRoute({ permission: 'people.read' }, ({ session }) => listPeople(session))
