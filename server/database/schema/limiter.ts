import { bigint, integer, pgTable, text } from 'drizzle-orm/pg-core'

/** Counters of rate-limiter-flexible: who tried how often (shape is the library's). */
export const limiter = pgTable('limiter', {
  key: text('key').primaryKey(),
  points: integer('points').notNull().default(0),
  expire: bigint('expire', { mode: 'number' }),
})
