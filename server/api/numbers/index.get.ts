import { numbersOfSchema } from '#shared/api/numbers'
import { defineRoute } from '../../http/defineRoute'
import { listProvisions } from '../../services/provision/keepProvisions'

/** Lists the numbers in force of an authority, a client's specification or the organisation itself. */
export default defineRoute({ permission: 'numbers.read', query: numbersOfSchema }, ({ session, query }) => listProvisions(session, query))
