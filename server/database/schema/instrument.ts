import { sql } from 'drizzle-orm'
import { bigint, date, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { account, organisation } from './account'
import { createdAt, instant, organisationId } from './columns'

/** What the organisation's people measure with (shared/api/instrument.ts). Never edited: one ends, another takes its place. */
export const instrument = pgTable('instrument', {
  organisationId: organisationId().references(() => organisation.id),
  id: uuid('id').notNull(),
  name: text('name').notNull(),
  unit: text('unit').notNull(),
  /** Expanded uncertainty (k = 2) in the integer unit of what it reads. */
  uncertainty: bigint('uncertainty', { mode: 'number' }).notNull(),
  /** As it was written. */
  text: text('text').notNull(),
  source: text('source').notNull(),
  checkedOn: date('checked_on'),
  writtenBy: uuid('written_by').notNull().references(() => account.id),
  createdAt: createdAt(),
  endedAt: instant('ended_at'),
}, table => [
  primaryKey({ columns: [table.organisationId, table.id] }),
  uniqueIndex('instrument_name').on(table.organisationId, sql`lower(${table.name})`).where(sql`ended_at is null`),
])
