import { foreignKey, index, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import { DELIVERY_EVENTS } from '../../../shared/api/record'
import { QUESTION_STATES } from '../../../shared/question/question'
import { account } from './account'
import { createdAt, instant, organisationId } from './columns'
import { job } from './job'

/** A sheet of questions as it was put to somebody: its exact canonical text. Never edited. */
export const questionSheet = pgTable('question_sheet', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  name: text('name').notNull(),
  /** Null for a sheet that was handed over on paper. */
  email: text('email'),
  text: text('text').notNull(),
  sentBy: uuid('sent_by').notNull().references(() => account.id),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  index('question_sheet_job').on(table.organisationId, table.jobId),
])

/** What is known of how far a sheet got. Added, never changed. */
export const questionEvent = pgTable('question_event', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  sheetId: uuid('sheet_id').notNull(),
  kind: text('kind', { enum: DELIVERY_EVENTS }).notNull(),
  detail: text('detail').notNull().default(''),
  at: createdAt('at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.sheetId], foreignColumns: [questionSheet.organisationId, questionSheet.id] }),
  index('question_event_sheet').on(table.organisationId, table.sheetId),
])

/** A question to the authority about a job's limits (shared/question). Once answered it never changes. */
export const question = pgTable('question', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  about: jsonb('about').notNull(),
  words: text('words').notNull(),
  state: text('state', { enum: QUESTION_STATES }).notNull().default('open'),
  writtenBy: uuid('written_by').notNull().references(() => account.id),
  createdAt: createdAt(),
  /** The sheet on which it was put last. */
  sheetId: uuid('sheet_id'),
  answer: jsonb('answer'),
  answeredBy: uuid('answered_by').references(() => account.id),
  answeredAt: instant('answered_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  foreignKey({ columns: [table.organisationId, table.sheetId], foreignColumns: [questionSheet.organisationId, questionSheet.id] }),
  index('question_job').on(table.organisationId, table.jobId),
])
