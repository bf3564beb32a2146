import { jobParamsSchema } from '#shared/sync/sync'
import { defineRoute } from '../../../../http/defineRoute'
import { readErasable } from '../../../../services/erasure/readErasable'

/** What of a job can be erased, what was asked and done, and whether a hold stands. */
export default defineRoute({ permission: 'erasure.write', params: jobParamsSchema }, ({ session, params }) => readErasable({ ...session, organisationId: session.organisationId! }, params.jobId))
