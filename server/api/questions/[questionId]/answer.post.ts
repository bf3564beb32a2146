import { questionAnswerInputSchema, questionIdSchema } from '#shared/api/question'
import { defineRoute } from '../../../http/defineRoute'
import { answerQuestion } from '../../../services/question/keepQuestions'

/** Writes down the answer that settles a question, with name, date and document; a number in it becomes the authority's. */
export default defineRoute({ permission: 'question.write', params: questionIdSchema, body: questionAnswerInputSchema }, async ({ session, params, body }) => {
  await answerQuestion(session, params.questionId, body)
  return { id: params.questionId }
})
