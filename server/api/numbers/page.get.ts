import { numbersPageSchema } from '#shared/api/numbers'
import { defineRoute } from '../../http/defineRoute'
import { readNumbersPage } from '../../services/provision/keepProvisions'

/** All measurands of a setting on one page, with the built-in basis and what this source has set. */
export default defineRoute({ permission: 'numbers.read', query: numbersPageSchema }, ({ session, query }) => readNumbersPage(session, query))
