/** Counts of attempts in a window, per account and per address: they slow and refuse, and run out by themselves. */
import { sql } from 'drizzle-orm'
import { check, index, integer, pgTable, text } from 'drizzle-orm/pg-core'
import { now } from './columns'

export const throttles = pgTable('throttles', {
  /** `account:<hash>` or `address:<hash>`: neither mail nor address stands here in clear. */
  subject: text('subject').primaryKey(),
  attempts: integer('attempts').notNull().default(0),
  windowStartedAt: now('window_started_at'),
}, table => [
  check('throttles_attempts', sql`${table.attempts} >= 0`),
  index('throttles_window_index').on(table.windowStartedAt),
])
