import { erasureParamsSchema } from '#shared/api/erasure'
import { defineRoute } from '../../../http/defineRoute'
import { withdrawErasure } from '../../../services/erasure/askErasure'

/** Takes back what was asked to be erased and is not yet. */
export default defineRoute({ permission: 'erasure.write', params: erasureParamsSchema }, ({ session, params }) => withdrawErasure(session, params.erasureId))
