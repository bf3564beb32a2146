import { z } from 'zod'
import { recordParamsSchema } from '#shared/api/record'
import { defineRoute } from '../../../http/defineRoute'
import { resumeSealing } from '../../../services/record/requestSealing'

/** Goes on with a sealing that stopped, from the step that was kept. */
export default defineRoute({ permission: 'record.seal', params: recordParamsSchema, body: z.object({}).strict() }, async ({ session, params }) => {
  await resumeSealing(session, params.recordId)
  return { goesOn: true }
})
