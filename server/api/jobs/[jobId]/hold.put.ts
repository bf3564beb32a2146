import { holdInputSchema } from '#shared/api/erasure'
import { jobParamsSchema } from '#shared/sync/sync'
import { defineRoute } from '../../../http/defineRoute'
import { setHold } from '../../../services/erasure/setHold'

/** Places or lifts a hold: while it stands nothing of the job is erased. */
export default defineRoute({ permission: 'erasure.write', params: jobParamsSchema, body: holdInputSchema }, ({ session, params, body }) => setHold(session, params.jobId, body.reason))
