import { epochInputSchema } from '#shared/api/log'
import { defineRoute } from '../../http/defineRoute'
import { openEpoch } from '../../services/log/openEpoch'

/** Opens a new epoch of a log that has fallen behind, with the reason. */
export default defineRoute({ permission: 'log.epoch', body: epochInputSchema }, ({ session, body }) => openEpoch(session, body.reason))
