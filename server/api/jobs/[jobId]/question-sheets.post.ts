import { setResponseStatus } from 'h3'
import { jobIdSchema } from '#shared/api/job'
import { questionSheetInputSchema } from '#shared/api/question'
import { defineRoute } from '../../../http/defineRoute'
import { putQuestions } from '../../../services/question/putQuestions'

/** Puts questions to somebody on a sheet: mailed where there is an address, else to print. */
export default defineRoute({ permission: 'question.write', params: jobIdSchema, body: questionSheetInputSchema }, async ({ event, session, params, body }) => {
  await putQuestions({ ...session, organisationId: session.organisationId! }, params.jobId, body)
  setResponseStatus(event, 202)
  return { id: body.id }
})
