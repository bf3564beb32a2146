import { bigint, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, unique, uuid } from 'drizzle-orm/pg-core'
import { DELIVERY_EVENTS, RECORD_STANDINGS, SEALING_STATES } from '../../../shared/api/record'
import { account, contact, organisation } from './account'
import { createdAt, instant, organisationId } from './columns'
import { job } from './job'
import { round } from './round'

/** An organisation's signing key, wrapped, with its certificates (PEM). */
export const signingKey = pgTable('signing_key', {
  organisationId: organisationId().references(() => organisation.id),
  id: uuid('id').notNull(),
  wrappedKey: text('wrapped_key').notNull(),
  certificate: text('certificate').notNull(),
  root: text('root').notNull(),
  createdAt: createdAt(),
  retiredAt: instant('retired_at'),
}, table => [primaryKey({ columns: [table.organisationId, table.id] })])

/** A record, and its sealing as a row with states (contracts.md 5). A resume starts from the last artefact. */
export const record = pgTable('record', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  roundId: uuid('round_id').notNull(),
  number: integer('number').notNull(),
  scope: text('scope', { enum: ['interim', 'final'] }).notNull(),
  /** What a person types on the check page: organisation's code, job, number. */
  code: text('code').notNull(),
  sealing: text('sealing', { enum: SEALING_STATES }).notNull().default('frozen'),
  /** What stopped the sealing, for a person; cleared by the next step. */
  trouble: text('trouble'),
  standing: text('standing', { enum: RECORD_STANDINGS }).notNull().default('current'),
  standingReason: text('standing_reason'),
  /** Last entry number that belongs to it. */
  border: integer('border').notNull(),
  /** Why it was sealed over devices still out; printed. */
  overDevices: text('over_devices'),
  documentDigest: text('document_digest'),
  pdfDigest: text('pdf_digest'),
  rangeDigest: text('range_digest'),
  fileDigest: text('file_digest'),
  pages: integer('pages'),
  bytes: integer('bytes'),
  leaf: bigint('leaf', { mode: 'number' }),
  sentence: jsonb('sentence'),
  requestedBy: uuid('requested_by').notNull().references(() => account.id),
  requestedAt: createdAt('requested_at'),
  sealedAt: instant('sealed_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  unique('record_code').on(table.organisationId, table.code),
  unique('record_number').on(table.organisationId, table.jobId, table.number),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  foreignKey({ columns: [table.organisationId, table.roundId], foreignColumns: [round.organisationId, round.id] }),
  index('record_document').on(table.documentDigest),
  index('record_public_code').on(table.code),
  index('record_range').on(table.rangeDigest),
  index('record_file').on(table.fileDigest),
])

/** Which elements a record speaks of, and which later record holds instead. */
export const recordElement = pgTable('record_element', {
  organisationId: organisationId(),
  recordId: uuid('record_id').notNull(),
  elementId: uuid('element_id').notNull(),
  tag: text('tag').notNull(),
  verdict: text('verdict').notNull(),
  released: text('released', { enum: ['released', 'held', 'open'] }).notNull(),
  replacedBy: uuid('replaced_by'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.recordId, table.elementId] }),
  foreignKey({ columns: [table.organisationId, table.recordId], foreignColumns: [record.organisationId, record.id] }),
])

/** The log of the installation (RFC 9162 hashing): appended only, by one function. */
export const logLeaf = pgTable('log_leaf', {
  position: bigint('position', { mode: 'number' }).primaryKey(),
  epoch: integer('epoch').notNull(),
  kind: text('kind').notNull(),
  /** Canonical JSON that the leaf hash is over, salt within. */
  text: text('text').notNull(),
  hash: text('hash').notNull(),
  organisationId: uuid('organisation_id').references(() => organisation.id),
  recordId: uuid('record_id'),
  at: createdAt('at'),
}, table => [index('log_leaf_record').on(table.recordId)])

/** Signed heads: size, root, time; each also written outside the database. */
export const logHead = pgTable('log_head', {
  size: bigint('size', { mode: 'number' }).primaryKey(),
  epoch: integer('epoch').notNull(),
  root: text('root').notNull(),
  text: text('text').notNull(),
  signature: text('signature').notNull(),
  at: createdAt('at'),
})

/** A record sent to named people. */
export const transmittal = pgTable('transmittal', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  recordId: uuid('record_id').notNull(),
  message: text('message').notNull().default(''),
  sentBy: uuid('sent_by').notNull().references(() => account.id),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.recordId], foreignColumns: [record.organisationId, record.id] }),
])

export const recipient = pgTable('recipient', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  transmittalId: uuid('transmittal_id').notNull(),
  recordId: uuid('record_id').notNull(),
  contactId: uuid('contact_id').notNull(),
  /** As it stood on the day. */
  name: text('name').notNull(),
  email: text('email').notNull(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  unique('recipient_once').on(table.organisationId, table.transmittalId, table.contactId),
  foreignKey({ columns: [table.organisationId, table.transmittalId], foreignColumns: [transmittal.organisationId, transmittal.id] }),
  foreignKey({ columns: [table.organisationId, table.recordId], foreignColumns: [record.organisationId, record.id] }),
  foreignKey({ columns: [table.organisationId, table.contactId], foreignColumns: [contact.organisationId, contact.id] }),
  index('recipient_contact').on(table.organisationId, table.contactId),
])

/** The delivery log: only what is known. Added, never changed. */
export const deliveryEvent = pgTable('delivery_event', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  recipientId: uuid('recipient_id').notNull(),
  kind: text('kind', { enum: DELIVERY_EVENTS }).notNull(),
  detail: text('detail').notNull().default(''),
  at: createdAt('at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.recipientId], foreignColumns: [recipient.organisationId, recipient.id] }),
  index('delivery_recipient').on(table.organisationId, table.recipientId),
])

/** A client's acceptance: a short sealed document of its own, bound to the record's digest. */
export const acceptance = pgTable('acceptance', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  recordId: uuid('record_id').notNull(),
  contactId: uuid('contact_id').notNull(),
  /** Reading of the deviation, or null where the work as a whole is accepted. */
  deficiencyId: uuid('deficiency_id'),
  meaning: text('meaning', { enum: ['receivedCopy', 'acceptsWork', 'acceptsDeviation', 'refusesDeviation'] }).notNull(),
  /** Its sign sheet: canonical JSON. */
  sheet: text('sheet').notNull(),
  fileDigest: text('file_digest').notNull(),
  leaf: bigint('leaf', { mode: 'number' }).notNull(),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.recordId], foreignColumns: [record.organisationId, record.id] }),
  foreignKey({ columns: [table.organisationId, table.contactId], foreignColumns: [contact.organisationId, contact.id] }),
  index('acceptance_file').on(table.fileDigest),
])
