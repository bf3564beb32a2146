import { setResponseStatus } from 'h3'
import { jobIdSchema } from '#shared/api/job'
import { questionInputSchema } from '#shared/api/question'
import { defineRoute } from '../../../http/defineRoute'
import { writeQuestion } from '../../../services/question/keepQuestions'

/** Writes a question to the authority down. */
export default defineRoute({ permission: 'question.write', params: jobIdSchema, body: questionInputSchema }, async ({ event, session, params, body }) => {
  await writeQuestion(session, params.jobId, body)
  setResponseStatus(event, 201)
  return { id: body.id }
})
