import type { QuestionInput, QuestionSheetRow } from '../../../shared/api/question'
import type { DeliveryEvent } from '../../../shared/api/record'
import type { Question, QuestionAnswer } from '../../../shared/question/question'
import type { Tx } from '../withSession'

const QUESTION = `q.id, q.about, q.words, q.state, s.name as "askedOf", s.created_at as "askedAt", q.sheet_id as "sheetId", q.answer`
const FROM = `from question q left join question_sheet s on s.organisation_id = q.organisation_id and s.id = q.sheet_id where q.organisation_id = app_organisation()`
type Row = Omit<Question, 'askedAt'> & { askedAt: Date | null }
const asQuestion = (row: Row): Question => ({ ...row, askedAt: row.askedAt && row.askedAt.toISOString() })

/** The questions of a job that were not withdrawn, oldest first. */
export async function questionsOf(tx: Tx, jobId: string): Promise<Question[]> {
  return (await tx.client.query<Row>(`select ${QUESTION} ${FROM} and q.job_id = $1 and q.state <> 'withdrawn' order by q.created_at, q.id`, [jobId])).rows.map(asQuestion)
}

export async function lockQuestion(tx: Tx, id: string): Promise<(Question & { jobId: string }) | undefined> {
  const { rows } = await tx.client.query<Row & { jobId: string }>(`select q.job_id as "jobId", ${QUESTION} ${FROM} and q.id = $1 for update of q`, [id])
  return rows[0] && { ...asQuestion(rows[0]), jobId: rows[0].jobId }
}

/** False where that id is there already: a repeat. */
export async function insertQuestion(tx: Tx, jobId: string, { id, about, words }: QuestionInput, writtenBy: string): Promise<boolean> {
  return (await tx.client.query('insert into question (organisation_id, id, job_id, about, words, written_by) values (app_organisation(), $1, $2, $3, $4, $5) on conflict do nothing',
    [id, jobId, JSON.stringify(about), words, writtenBy])).rowCount === 1
}

export async function withdraw(tx: Tx, id: string): Promise<void> {
  await tx.client.query(`update question set state = 'withdrawn' where organisation_id = app_organisation() and id = $1`, [id])
}

export async function settle(tx: Tx, id: string, answer: QuestionAnswer, answeredBy: string): Promise<void> {
  await tx.client.query(`update question set state = 'answered', answer = $2, answered_by = $3, answered_at = now() where organisation_id = app_organisation() and id = $1`, [id, JSON.stringify(answer), answeredBy])
}

export async function sheetIsThere(tx: Tx, id: string): Promise<boolean> {
  return (await tx.client.query('select from question_sheet where organisation_id = app_organisation() and id = $1', [id])).rowCount === 1
}

/** Keeps a sheet, and puts its questions on it. */
export async function insertSheet(tx: Tx, sheet: { id: string, jobId: string, name: string, email: string | null, text: string, sentBy: string, questions: string[] }): Promise<void> {
  await tx.client.query('insert into question_sheet (organisation_id, id, job_id, name, email, text, sent_by) values (app_organisation(), $1, $2, $3, $4, $5, $6)', [sheet.id, sheet.jobId, sheet.name, sheet.email, sheet.text, sheet.sentBy])
  await tx.client.query(`update question set state = 'asked', sheet_id = $2 where organisation_id = app_organisation() and id = any($1::uuid[])`, [sheet.questions, sheet.id])
}

export async function sheetOf(tx: Tx, id: string): Promise<{ text: string, name: string, email: string | null, handed: boolean } | undefined> {
  return (await tx.client.query<{ text: string, name: string, email: string | null, handed: boolean }>(
    `select s.text, s.name, s.email, exists (select 1 from question_event e where e.organisation_id = s.organisation_id and e.sheet_id = s.id and e.kind in ('handed', 'returned')) as handed
       from question_sheet s where s.organisation_id = app_organisation() and s.id = $1`, [id])).rows[0]
}

export async function addEvent(tx: Tx, sheetId: string, id: string, kind: DeliveryEvent, detail: string): Promise<void> {
  await tx.client.query('insert into question_event (organisation_id, id, sheet_id, kind, detail, at) values (app_organisation(), $1, $2, $3, $4, clock_timestamp())', [id, sheetId, kind, detail])
}

/** Sheets of a job with what is known of how far each got, newest first. */
export async function sheetsOf(tx: Tx, jobId: string): Promise<QuestionSheetRow[]> {
  return (await tx.client.query<QuestionSheetRow>(
    `select s.id, s.name, s.email, a.name as "sentBy", s.created_at as at, jsonb_array_length(s.text::jsonb->'questions') as questions,
            coalesce((select json_agg(json_build_object('kind', e.kind, 'detail', e.detail, 'at', e.at) order by e.at, e.id) from question_event e where e.organisation_id = s.organisation_id and e.sheet_id = s.id), '[]') as events
       from question_sheet s join account a on a.id = s.sent_by where s.organisation_id = app_organisation() and s.job_id = $1 order by s.created_at desc`, [jobId])).rows
}

/** The questions of a job as they stood at an instant, oldest first: what a record of that instant says of them. */
export async function questionsUntil(tx: Tx, jobId: string, at: Date): Promise<{ words: string, askedOf: string | null, askedAt: Date | null, answer: QuestionAnswer | null }[]> {
  return (await tx.client.query<{ words: string, askedOf: string | null, askedAt: Date | null, answer: QuestionAnswer | null }>(
    `select q.words, s.name as "askedOf", s.created_at as "askedAt", case when q.answered_at <= $2 then q.answer end as answer
       from question q left join question_sheet s on s.organisation_id = q.organisation_id and s.id = q.sheet_id and s.created_at <= $2
      where q.organisation_id = app_organisation() and q.job_id = $1 and q.created_at <= $2 and q.state <> 'withdrawn' order by q.created_at, q.id`, [jobId, at])).rows
}
