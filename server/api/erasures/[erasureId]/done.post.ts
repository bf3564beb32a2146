import { z } from 'zod'
import { erasureParamsSchema } from '#shared/api/erasure'
import { defineRoute } from '../../../http/defineRoute'
import { doErasure } from '../../../services/erasure/doErasure'

/** A second person of the office erases what was asked. It cannot be brought back. */
export default defineRoute({ permission: 'erasure.write', params: erasureParamsSchema, body: z.object({}).strict() }, ({ session, params }) => doErasure({ ...session, organisationId: session.organisationId! }, params.erasureId))
