import { questionIdSchema } from '#shared/api/question'
import { defineRoute } from '../../http/defineRoute'
import { withdrawQuestion } from '../../services/question/keepQuestions'

/** Withdraws a question that is not answered; it is kept. */
export default defineRoute({ permission: 'question.write', params: questionIdSchema }, async ({ session, params }) => {
  await withdrawQuestion(session, params.questionId)
  return { withdrawn: true }
})
