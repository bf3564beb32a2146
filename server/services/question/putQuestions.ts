import { uuidv7 } from 'uuidv7'
import { jobCode } from '../../../shared/api/job'
import type { QuestionSheetInput } from '../../../shared/api/question'
import { questionSheetSchema, type QuestionSheet } from '../../../shared/question/question'
import { canonicalJson } from '../../../shared/record/canonicalJson'
import { readJobRow } from '../../database/queries/job'
import * as questions from '../../database/queries/question'
import type { Session } from '../../database/withSession'
import { forOrganisation, withSession } from '../../database/withSession'
import { buildQuestionSheetPdf } from '../../documents/questionSheetPdf'
import { composeMail } from '../../mail/composeMail'
import { sendMail } from '../../mail/sendMail'
import { enqueue } from '../../tasks/queue'
import { Failure, notFound } from '../failure'
import { instantAt, zoneNames } from '../record/zoneNames'

/** Puts questions to somebody: keeps the sheet as it was put, and queues its mail where there is an address. Sent again with the same id it is the same sheet. */
export async function putQuestions(who: Session & { accountId: string, organisationId: string, name: string, email: string }, jobId: string, input: QuestionSheetInput): Promise<void> {
  await withSession(who, async (tx) => {
    const job = await readJobRow(tx, jobId)
    if (!job) throw notFound('job')
    if (await questions.sheetIsThere(tx, input.id)) return
    const chosen = (await questions.questionsOf(tx, jobId)).filter(one => input.questions.includes(one.id))
    if (chosen.length !== new Set(input.questions).size || chosen.some(one => one.state === 'answered')) throw new Failure('stale', 'One of these questions was answered or withdrawn meanwhile. Load the page again and choose anew.')
    const at = instantAt(new Date(), job.timeZone)
    const sheet: QuestionSheet = questionSheetSchema.parse({
      format: 'smoothside-questions', version: 1, id: input.id, language: input.language, system: job.system, at, zones: zoneNames([at], job.timeZone),
      organisation: job.organisationName, from: { name: who.name, email: who.email }, to: input.name,
      job: { code: jobCode(job.organisationCode, job.number), title: job.title, permit: job.permit }, site: { name: job.siteName, address: job.siteAddress }, client: job.clientName,
      message: input.message, questions: chosen.map(({ id, about, words }) => ({ id, about, words })),
    })
    await questions.insertSheet(tx, { id: input.id, jobId, name: input.name, email: input.email, text: canonicalJson(sheet), sentBy: who.accountId, questions: input.questions })
    if (!input.email) return
    await questions.addEvent(tx, input.id, uuidv7(), 'queued', '')
    await enqueue(tx, 'ask', { organisationId: who.organisationId, id: input.id })
  })
}

/** The sheet as a PDF and the name that it is saved under: built from the kept text alone, so that it is the same on any day. */
export async function readSheetFile(who: Session, id: string): Promise<{ bytes: Uint8Array, name: string }> {
  const row = await withSession(who, tx => questions.sheetOf(tx, id))
  if (!row) throw notFound('sheet')
  const sheet = questionSheetSchema.parse(JSON.parse(row.text))
  return { bytes: await buildQuestionSheetPdf(sheet), name: `${sheet.job.code}-questions-${sheet.at.slice(0, 10)}.pdf` }
}

/** Mails a sheet to whom it is put, and writes into its log what the mail server said. */
export async function mailSheet(organisationId: string, id: string): Promise<void> {
  const session = forOrganisation(organisationId)
  const row = await withSession(session, tx => questions.sheetOf(tx, id))
  if (!row?.email || row.handed) return
  const sheet = questionSheetSchema.parse(JSON.parse(row.text))
  const { bytes, name } = await readSheetFile(session, id)
  const note = (kind: 'handed' | 'returned' | 'deferred', detail: string) => withSession(session, tx => questions.addEvent(tx, id, uuidv7(), kind, detail.slice(0, 300)))
  const composed = composeMail(sheet.language, 'questions', {
    name: sheet.to, organisation: sheet.organisation, site: sheet.site.name, job: sheet.job.code, message: sheet.message, from: sheet.from.name, email: sheet.from.email,
    questions: sheet.questions.map((one, at) => `${at + 1}. ${one.about.title[sheet.language]} (${one.about.tags.join(', ')}): ${one.words}`).join('\n'),
  })
  try {
    const { response } = await sendMail({ to: { name: sheet.to, address: row.email }, ...composed, attachments: [{ filename: name, content: Buffer.from(bytes), contentType: 'application/pdf' }] })
    await note('handed', response)
  }
  catch (error) {
    if (!(error instanceof Failure)) throw error
    await note(error.code === 'mailDown' ? 'deferred' : 'returned', error.message)
    // Deferred: the queue tries again, later each time.
    if (error.code === 'mailDown') throw error
  }
}
