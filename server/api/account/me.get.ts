import { defineRoute } from '../../http/defineRoute'
import { readMe } from '../../services/account/readMe'

/** Who is signed in, and as what else they may act. */
export default defineRoute({ permission: 'account.own' }, ({ session }) => readMe(session))
