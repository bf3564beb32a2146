import { timestamp, uuid } from 'drizzle-orm/pg-core'

/** First column of every tenant table's primary key; see contracts.md 6. */
export const organisationId = () => uuid('organisation_id').notNull()
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' })
export const createdAt = (name = 'created_at') => instant(name).notNull().defaultNow()
