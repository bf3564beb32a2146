import { sql } from 'drizzle-orm'
import { boolean, foreignKey, index, integer, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { ROLES } from '../../../shared/permission/permission'
import { createdAt, instant, organisationId } from './columns'

/** One row, id 1: what belongs to the installation and to no organisation. */
export const installation = pgTable('installation', {
  id: integer('id').primaryKey(),
  /** Changes with a restore: devices that see another epoch offer again what they hold. */
  storeEpoch: uuid('store_epoch').notNull(),
  /** Log epoch: opened anew by an administrator after the database fell behind the outside head. */
  logEpoch: integer('log_epoch').notNull().default(1),
  /** Private key (wrapped) and certificate of the witness that signs log heads and acceptances. */
  witnessKey: text('witness_key'),
  witnessCertificate: text('witness_certificate'),
  workerSeenAt: instant('worker_seen_at'),
})

export const organisation = pgTable('organisation', {
  id: uuid('id').primaryKey(),
  name: text('name').notNull(),
  /** Two to four capitals that its record codes begin with. */
  code: text('code').notNull().unique(),
  system: text('system', { enum: ['imperial', 'metric'] }).notNull().default('imperial'),
  language: text('language', { enum: ['en', 'es'] }).notNull().default('en'),
  timeZone: text('time_zone').notNull(),
  phone: text('phone'),
  nextJob: integer('next_job').notNull().default(1),
  createdAt: createdAt(),
})

/** A person: one e-mail, no organisation. */
export const account = pgTable('account', {
  id: uuid('id').primaryKey(),
  /** Lower case. */
  email: text('email').notNull().unique(),
  name: text('name').notNull(),
  language: text('language', { enum: ['en', 'es'] }).notNull().default('en'),
  passwordHash: text('password_hash'),
  createdAt: createdAt(),
})

export const membership = pgTable('membership', {
  organisationId: organisationId().references(() => organisation.id),
  accountId: uuid('account_id').notNull().references(() => account.id),
  role: text('role', { enum: ROLES }).notNull(),
  createdAt: createdAt(),
  endedAt: instant('ended_at'),
}, table => [primaryKey({ columns: [table.organisationId, table.accountId] }), index('membership_account').on(table.accountId)])

/** A session that the database can end; the cookie holds the token of which only the SHA-256 stands here. */
export const session = pgTable('session', {
  tokenHash: text('token_hash').primaryKey(),
  accountId: uuid('account_id').notNull().references(() => account.id),
  /** Set for staff and crew; a client acts for every contractor that names it as a contact. */
  organisationId: uuid('organisation_id').references(() => organisation.id),
  standing: text('standing', { enum: ['staff', 'crew', 'client'] }).notNull(),
  createdAt: createdAt(),
  seenAt: instant('seen_at').notNull().defaultNow(),
  expiresAt: instant('expires_at').notNull(),
}, table => [index('session_account').on(table.accountId)])

/** Links sent by mail: only the SHA-256 of the token is kept. GET shows, a button redeems. */
export const link = pgTable('link', {
  tokenHash: text('token_hash').primaryKey(),
  purpose: text('purpose', { enum: ['invitation', 'reset', 'contact'] }).notNull(),
  accountId: uuid('account_id').references(() => account.id),
  organisationId: uuid('organisation_id').references(() => organisation.id),
  /** For a contact's link: who it was sent to, and what it opens on. */
  contactId: uuid('contact_id'),
  recordId: uuid('record_id'),
  role: text('role', { enum: ROLES }),
  email: text('email').notNull(),
  createdAt: createdAt(),
  expiresAt: instant('expires_at').notNull(),
  redeemedAt: instant('redeemed_at'),
})

export const client = pgTable('client', {
  organisationId: organisationId().references(() => organisation.id),
  id: uuid('id').notNull(),
  name: text('name').notNull(),
  address: text('address').notNull().default(''),
  createdAt: createdAt(),
}, table => [primaryKey({ columns: [table.organisationId, table.id] }), uniqueIndex('client_name').on(table.organisationId, sql`lower(${table.name})`)])

/** A person (or a role's mailbox) at a client. With an account it can sign in. */
export const contact = pgTable('contact', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  clientId: uuid('client_id').notNull(),
  accountId: uuid('account_id').references(() => account.id),
  name: text('name').notNull(),
  email: text('email').notNull(),
  phone: text('phone').notNull().default(''),
  title: text('title').notNull().default(''),
  /** Named by the client to accept work and deviations for the owner. */
  accepts: boolean('accepts').notNull().default(false),
  /** A role's mailbox and not a person; gets records, signs nothing. */
  mailbox: boolean('mailbox').notNull().default(false),
  createdAt: createdAt(),
  endedAt: instant('ended_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.clientId], foreignColumns: [client.organisationId, client.id] }),
  uniqueIndex('contact_email').on(table.organisationId, table.clientId, table.email),
  index('contact_account').on(table.accountId),
])

/** An administrator's or manager's act that changes who may do what, or what a record is worth. */
export const auditRow = pgTable('audit_row', {
  organisationId: organisationId().references(() => organisation.id),
  id: uuid('id').notNull(),
  accountId: uuid('account_id').references(() => account.id),
  act: text('act').notNull(),
  subject: text('subject').notNull(),
  at: createdAt('at'),
}, table => [primaryKey({ columns: [table.organisationId, table.id] })])
