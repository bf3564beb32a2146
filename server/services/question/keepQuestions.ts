import type { JobLimitsOf, QuestionAnswerInput, QuestionInput } from '../../../shared/api/question'
import { datumsOf } from '../../../shared/question/question'
import { questionsOf, sheetsOf } from '../../database/queries/question'
import * as questions from '../../database/queries/question'
import { readJobRow } from '../../database/queries/job'
import { provisionsInForce } from '../../database/queries/provision'
import { basesOf, newestRound } from '../../database/queries/round'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'
import { keepProvision, reviewsDue } from '../provision/keepProvisions'
import { readBasis } from '../round/foldRound'

type Who = Session & { accountId: string }

/** What the desk knows of a job's limits beside its walk list. */
export async function readJobLimits(who: Session, jobId: string): Promise<JobLimitsOf> {
  return withSession(who, async (tx) => {
    const job = await readJobRow(tx, jobId)
    if (!job) throw notFound('job')
    const provisions = await provisionsInForce(tx, job)
    const round = await newestRound(tx, jobId)
    const text = round?.state === 'open' && (await basesOf(tx, jobId)).find(basis => basis.digest === round.basis)
    const pinned = text ? (readBasis(text.digest, text.text).provisions ?? []).map(one => one.id).sort().join() : null
    return {
      questions: await questionsOf(tx, jobId),
      sheets: await sheetsOf(tx, jobId),
      numbersChanged: pinned !== null && pinned !== provisions.map(one => one.id).sort().join(),
      reviews: reviewsDue(provisions),
    }
  })
}

/** Writes a question down. The same id again is the same question. */
export async function writeQuestion(who: Who, jobId: string, input: QuestionInput): Promise<void> {
  await withSession(who, async (tx) => {
    if (!await readJobRow(tx, jobId)) throw notFound('job')
    await questions.insertQuestion(tx, jobId, input, who.accountId)
  })
}

export async function withdrawQuestion(who: Who, id: string): Promise<void> {
  await withSession(who, async (tx) => {
    const question = await questions.lockQuestion(tx, id)
    if (!question) throw notFound('question')
    if (question.state === 'answered') throw new Failure('conflict', 'This question is answered, and its answer stays in the records. Write a new question if something changed.')
    await questions.withdraw(tx, id)
  })
}

/** Writes down what settles a question; a number in it becomes a local number of the site's authority, read in that answer and confirmed by who gave it. */
export async function answerQuestion(who: Who, id: string, { answer, number }: QuestionAnswerInput): Promise<void> {
  await withSession(who, async (tx) => {
    const question = await questions.lockQuestion(tx, id)
    if (!question) throw notFound('question')
    if (question.state === 'answered' || question.state === 'withdrawn') throw new Failure('conflict', 'This question is settled already. Write a new question if something changed.')
    await questions.settle(tx, id, answer, who.accountId)
    if (!number) return
    const job = await readJobRow(tx, question.jobId)
    if (!job?.authorityId) throw new Failure('invalid', 'A number needs to be somebody\'s: choose the authority of this site first, then write the answer down again.', [{ pointer: '/number', code: 'noAuthority', detail: 'Choose the authority of this site first.' }])
    const { about } = question
    if (!datumsOf(about).includes(number.limit.datum) || number.limit.unit !== about.unit) throw new Failure('invalid', 'The number has to be of what was asked.', [{ pointer: '/number/limit', code: 'otherThing', detail: 'Give it from the same place and in the same unit as the question.' }])
    await keepProvision(tx, who.accountId, { authorityId: job.authorityId, clientId: null, provision: {
      id: number.id, kind: 'authority', measurand: about.measurand, setting: about.setting, effect: number.effect, limit: number.limit, note: answer.words,
      name: job.authorityName!, citation: answer.document, confirmedBy: answer.name, confirmedOn: answer.on,
    } })
  })
}
