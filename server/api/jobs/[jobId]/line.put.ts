import { jobIdSchema, lineInputSchema } from '#shared/api/job'
import { defineRoute } from '../../../http/defineRoute'
import { saveLine } from '../../../services/job/saveLine'

/** Saves a new version of the job's line and pins what the walk is held against. */
export default defineRoute({ permission: 'line.write', params: jobIdSchema, body: lineInputSchema, maxBytes: 4_000_000 }, ({ session, params, body }) =>
  saveLine({ ...session, organisationId: session.organisationId! }, params.jobId, body.from, body.line, body.why))
