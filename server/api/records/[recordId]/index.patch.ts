import { recordParamsSchema, standingInputSchema } from '#shared/api/record'
import { defineRoute } from '../../../http/defineRoute'
import { changeStanding } from '../../../services/record/changeStanding'

/** Puts a sealed record under question, withdraws it, or takes the question back. */
export default defineRoute({ permission: 'record.standing', params: recordParamsSchema, body: standingInputSchema }, async ({ session, params, body }) => {
  await changeStanding({ ...session, organisationId: session.organisationId! }, params.recordId, body.standing, body.reason)
  return { standing: body.standing }
})
