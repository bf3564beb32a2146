import { sql } from 'drizzle-orm'
import { boolean, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, unique, uuid } from 'drizzle-orm/pg-core'
import { DEFICIENCY_CLASSES } from '../../../shared/checklist/check'
import { DEFICIENCY_STATES, VERDICTS } from '../../../shared/round/outcome'
import { account } from './account'
import { createdAt, instant, organisationId } from './columns'
import { job } from './job'

/** All that happens on a job until a record is sealed. `accepted` is the last number given; its row lock orders acceptance and freezes the round. */
export const round = pgTable('round', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  number: integer('number').notNull(),
  state: text('state', { enum: ['open', 'frozen', 'sealed'] }).notNull().default('open'),
  accepted: integer('accepted').notNull().default(0),
  basis: text('basis').notNull(),
  openedBy: uuid('opened_by').notNull().references(() => account.id),
  openedAt: createdAt('opened_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  unique('round_number').on(table.organisationId, table.jobId, table.number),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
])

/** A device that took the round along; its letter begins the tags that it gives. */
export const roundDevice = pgTable('round_device', {
  organisationId: organisationId(),
  roundId: uuid('round_id').notNull(),
  deviceId: uuid('device_id').notNull(),
  accountId: uuid('account_id').notNull().references(() => account.id),
  name: text('name').notNull(),
  letter: text('letter').notNull(),
  takenAt: createdAt('taken_at'),
  /** When it last said that nothing waits on it any more; null or before takenAt: still out. */
  emptyAt: instant('empty_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.roundId, table.deviceId] }),
  unique('round_device_letter').on(table.organisationId, table.roundId, table.letter),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
])

/** Entries refuse UPDATE, DELETE and TRUNCATE by privilege and trigger. The two texts are exactly what was received. */
export const entry = pgTable('entry', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  roundId: uuid('round_id').notNull(),
  number: integer('number').notNull(),
  jobId: uuid('job_id').notNull(),
  kind: text('kind').notNull(),
  authorId: uuid('author_id').notNull(),
  elementId: uuid('element_id'),
  checkId: text('check_id'),
  digest: text('digest').notNull(),
  envelopeText: text('envelope_text').notNull(),
  payloadText: text('payload_text'),
  payload: jsonb('payload'),
  acceptedAt: createdAt('accepted_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  unique('entry_number').on(table.organisationId, table.roundId, table.number),
  index('entry_erased').on(table.organisationId, table.roundId).where(sql`payload_text is null`),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
])

/** Entries that name what the server has not seen yet, and entries whose id came again with another digest. Nothing is thrown away. */
export const entryAside = pgTable('entry_aside', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  digest: text('digest').notNull(),
  roundId: uuid('round_id').notNull(),
  why: text('why', { enum: ['held', 'quarantined'] }).notNull(),
  envelopeText: text('envelope_text').notNull(),
  payloadText: text('payload_text').notNull(),
  authorId: uuid('author_id').notNull(),
  receivedAt: createdAt('received_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id, table.digest] }),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
])

/** The fold as kept for lists, written in the accepting transaction; `npm run refold` rebuilds it. Its checks stand in rows of their own. */
export const roundState = pgTable('round_state', {
  organisationId: organisationId(),
  roundId: uuid('round_id').notNull(),
  accepted: integer('accepted').notNull(),
  outcome: jsonb('outcome').notNull(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.roundId] }),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
])

/** One check of the fold, whole, so that a push writes only the checks that it changes. `at` is its place in the outcome. */
export const checkState = pgTable('check_state', {
  organisationId: organisationId(),
  roundId: uuid('round_id').notNull(),
  elementId: uuid('element_id').notNull(),
  checkId: text('check_id').notNull(),
  /** 'outer', 'inner' or '' for the element as a whole. */
  face: text('face').notNull(),
  verdict: text('verdict', { enum: VERDICTS }).notNull(),
  settled: boolean('settled').notNull(),
  readAgain: boolean('read_again').notNull(),
  at: integer('at').notNull(),
  outcome: jsonb('outcome').notNull(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.roundId, table.elementId, table.checkId, table.face] }),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
])

export const deficiencyState = pgTable('deficiency_state', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  roundId: uuid('round_id').notNull(),
  jobId: uuid('job_id').notNull(),
  tag: text('tag').notNull(),
  elementId: uuid('element_id').notNull(),
  checkId: text('check_id').notNull(),
  class: text('class', { enum: DEFICIENCY_CLASSES }).notNull(),
  state: text('state', { enum: DEFICIENCY_STATES }).notNull(),
  assignedTo: uuid('assigned_to'),
  due: instant('due'),
  outcome: jsonb('outcome').notNull(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
  index('deficiency_job').on(table.organisationId, table.jobId),
  index('deficiency_state_assigned').on(table.organisationId, table.assignedTo, table.state),
])

/** That a job has a photo. Its final bytes stand once in the store under their digest, whichever jobs have it. */
export const photo = pgTable('photo', {
  organisationId: organisationId(),
  digest: text('digest').notNull(),
  jobId: uuid('job_id').notNull(),
  bytes: integer('bytes').notNull(),
  width: integer('width').notNull(),
  height: integer('height').notNull(),
  sentBy: uuid('sent_by').notNull().references(() => account.id),
  storedAt: createdAt('stored_at'),
  erasedAt: instant('erased_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.digest, table.jobId] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
])

/** What somebody asked to have erased: the payload of an entry or a picture, with the reason. A second person does it, through the owner's function `redact`. */
export const erasure = pgTable('erasure', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  entryId: uuid('entry_id'),
  /** Digest of a picture's final bytes. */
  photo: text('photo'),
  reason: text('reason').notNull(),
  askedBy: uuid('asked_by').notNull().references(() => account.id),
  askedAt: createdAt('asked_at'),
  withdrawnAt: instant('withdrawn_at'),
  doneBy: uuid('done_by').references(() => account.id),
  doneAt: instant('done_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  foreignKey({ columns: [table.organisationId, table.entryId], foreignColumns: [entry.organisationId, entry.id] }),
])
