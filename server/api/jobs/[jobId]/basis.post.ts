import { jobIdSchema } from '#shared/api/job'
import { basisRenewSchema } from '#shared/api/question'
import { defineRoute } from '../../../http/defineRoute'
import { renewBasis } from '../../../services/job/saveLine'

/** Brings a job's walk list up to the numbers in force; in an open round that is a change of basis that everybody sees. */
export default defineRoute({ permission: 'round.basis', params: jobIdSchema, body: basisRenewSchema }, async ({ session, params, body }) =>
  ({ basis: (await renewBasis({ ...session, organisationId: session.organisationId! }, params.jobId, body.why))?.basis ?? null }))
