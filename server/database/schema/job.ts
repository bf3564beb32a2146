import { sql } from 'drizzle-orm'
import { date, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, unique, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { JOB_MOVES, JOB_STATES } from '../../../shared/api/job'
import { account, client, organisation } from './account'
import { createdAt, instant, organisationId } from './columns'

/** Whoever enforces numbers at a place: a county, a town, a district. */
export const authority = pgTable('authority', {
  organisationId: organisationId().references(() => organisation.id),
  id: uuid('id').notNull(),
  name: text('name').notNull(),
  createdAt: createdAt(),
}, table => [primaryKey({ columns: [table.organisationId, table.id] }), uniqueIndex('authority_name').on(table.organisationId, sql`lower(${table.name})`)])

export const site = pgTable('site', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  clientId: uuid('client_id').notNull(),
  authorityId: uuid('authority_id'),
  name: text('name').notNull(),
  address: text('address').notNull().default(''),
  timeZone: text('time_zone').notNull(),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.clientId], foreignColumns: [client.organisationId, client.id] }),
  foreignKey({ columns: [table.organisationId, table.authorityId], foreignColumns: [authority.organisationId, authority.id] }),
  index('site_client').on(table.organisationId, table.clientId),
])

/** An element belongs to the site and keeps its id over jobs. */
export const element = pgTable('element', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  siteId: uuid('site_id').notNull(),
  kind: text('kind').notNull(),
  tag: text('tag').notNull(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.siteId], foreignColumns: [site.organisationId, site.id] }),
  index('element_site').on(table.organisationId, table.siteId),
])

/** A local number or note: set by an authority, or by a client's standing specification. Its shape is shared/provision. */
export const provision = pgTable('provision', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  authorityId: uuid('authority_id'),
  clientId: uuid('client_id'),
  setting: text('setting').notNull(),
  measurand: text('measurand').notNull(),
  provision: jsonb('provision').notNull(),
  writtenBy: uuid('written_by').notNull().references(() => account.id),
  createdAt: createdAt(),
  /** Set when a newer one takes its place: provisions are never edited. */
  endedAt: instant('ended_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.authorityId], foreignColumns: [authority.organisationId, authority.id] }),
  foreignKey({ columns: [table.organisationId, table.clientId], foreignColumns: [client.organisationId, client.id] }),
  index('provision_in_force').on(table.organisationId, table.measurand).where(sql`ended_at is null`),
])

export const job = pgTable('job', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  number: integer('number').notNull(),
  siteId: uuid('site_id').notNull(),
  clientId: uuid('client_id').notNull(),
  title: text('title').notNull(),
  neededBy: date('needed_by', { mode: 'string' }),
  onsiteName: text('onsite_name').notNull().default(''),
  onsitePhone: text('onsite_phone').notNull().default(''),
  emergencyName: text('emergency_name').notNull().default(''),
  emergencyPhone: text('emergency_phone').notNull().default(''),
  /** The client's own keys. */
  contract: text('contract').notNull().default(''),
  permit: text('permit').notNull().default(''),
  buildingCode: text('building_code').notNull().default(''),
  gateTag: text('gate_tag').notNull().default(''),
  system: text('system', { enum: ['imperial', 'metric'] }).notNull(),
  /** Language of the record. */
  language: text('language', { enum: ['en', 'es'] }).notNull(),
  checklists: jsonb('checklists').$type<string[]>().notNull(),
  state: text('state', { enum: JOB_STATES }).notNull().default('drawing'),
  /** Whose move it is and which, kept by the same transaction that changes it. */
  moveBy: text('move_by', { enum: ['crew', 'inspector', 'manager', 'client', 'authority'] }).notNull().default('manager'),
  move: text('move', { enum: JOB_MOVES }).notNull().default('drawLine'),
  moveCount: integer('move_count').notNull().default(0),
  moveSince: instant('move_since').notNull().defaultNow(),
  /** Small copy of what the list draws: [length, state] of each element and tags; see shared/api/job.ts. */
  strip: jsonb('strip').notNull().default({}),
  openTags: integer('open_tags').notNull().default(0),
  heldOut: integer('held_out').notNull().default(0),
  /** Lower-case words that a list is searched by. */
  searchText: text('search_text').notNull().default(''),
  createdBy: uuid('created_by').notNull().references(() => account.id),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  unique('job_number').on(table.organisationId, table.number),
  foreignKey({ columns: [table.organisationId, table.siteId], foreignColumns: [site.organisationId, site.id] }),
  foreignKey({ columns: [table.organisationId, table.clientId], foreignColumns: [client.organisationId, client.id] }),
  index('job_needed').on(table.organisationId, table.neededBy, table.id),
  // The list's own order: a page reads as many rows as it shows.
  index('job_order').on(table.organisationId, sql`coalesce(${table.neededBy}, date '9999-12-31')`, table.id).where(sql`state <> 'closed'`),
  index('job_state').on(table.organisationId, table.state, table.neededBy, table.id),
  index('job_site').on(table.organisationId, table.siteId),
])

/** To whom a job is given; crew see nothing else. */
export const jobGiven = pgTable('job_given', {
  organisationId: organisationId(),
  jobId: uuid('job_id').notNull(),
  accountId: uuid('account_id').notNull().references(() => account.id),
  givenAs: text('given_as', { enum: ['inspector', 'crew'] }).notNull(),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.jobId, table.accountId] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  index('job_given_account').on(table.accountId, table.organisationId),
])

/** A version of the line as the desk drew it; the exact canonical text. Never edited. */
export const lineVersion = pgTable('line_version', {
  organisationId: organisationId(),
  jobId: uuid('job_id').notNull(),
  version: integer('version').notNull(),
  line: text('line').notNull(),
  writtenBy: uuid('written_by').notNull().references(() => account.id),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.jobId, table.version] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
])

/** A trial calculation that somebody kept with an element (shared/trial): no reading, no part of a record. Only ever added. */
export const trial = pgTable('trial', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  elementId: uuid('element_id').notNull(),
  trial: jsonb('trial').notNull(),
  writtenBy: uuid('written_by').notNull().references(() => account.id),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  foreignKey({ columns: [table.organisationId, table.elementId], foreignColumns: [element.organisationId, element.id] }),
  index('trial_job').on(table.organisationId, table.jobId, table.createdAt),
])

/** What a walk is held against (shared/round/basis.ts): canonical text named by its SHA-256. Never edited. */
export const basis = pgTable('basis', {
  organisationId: organisationId(),
  jobId: uuid('job_id').notNull(),
  digest: text('digest').notNull(),
  text: text('text').notNull(),
  writtenBy: uuid('written_by').notNull().references(() => account.id),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.organisationId, table.jobId, table.digest] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
])

/** A hold on a job: while it stands nothing of the job is erased. */
export const jobHold = pgTable('job_hold', {
  organisationId: organisationId(),
  id: uuid('id').notNull(),
  jobId: uuid('job_id').notNull(),
  reason: text('reason').notNull(),
  placedBy: uuid('placed_by').notNull().references(() => account.id),
  placedAt: createdAt('placed_at'),
  liftedBy: uuid('lifted_by').references(() => account.id),
  liftedAt: instant('lifted_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  foreignKey({ columns: [table.organisationId, table.jobId], foreignColumns: [job.organisationId, job.id] }),
  uniqueIndex('job_hold_one').on(table.organisationId, table.jobId).where(sql`lifted_at is null`),
])
