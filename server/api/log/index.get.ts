import { defineRoute } from '../../http/defineRoute'
import { readLog } from '../../services/log/openEpoch'

/** How the installation's log stands, and whether the database has fallen behind its last outside head. */
export default defineRoute({ permission: 'log.epoch' }, () => readLog())
