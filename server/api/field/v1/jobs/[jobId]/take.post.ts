import { jobParamsSchema, takeSchema } from '#shared/sync/sync'
import { defineRoute } from '../../../../../http/defineRoute'
import { takeAlong } from '../../../../../services/round/takeAlong'

/** Takes a job along on a device: the bundle to work with no signal. */
export default defineRoute({ permission: 'round.take', params: jobParamsSchema, body: takeSchema }, ({ session, params, body }) => takeAlong(session, params.jobId, body))
