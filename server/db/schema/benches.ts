/** Shared workspaces of a group. Everything belongs to one. */
import { sql } from 'drizzle-orm'
import { check, integer, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { key, now } from './columns'
import { users } from './users'

export const benches = pgTable('benches', {
  benchId: key('bench_id'),
  name: text('name').notNull(),
  createdBy: uuid('created_by').notNull().references(() => users.userId),
  createdAt: now('created_at'),
  /** Runs are numbered within a bench, without gaps: this is the last number given. */
  runsNumbered: integer('runs_numbered').notNull().default(0),
  weighUpsNumbered: integer('weigh_ups_numbered').notNull().default(0),
}, table => [
  check('benches_name_length', sql`char_length(${table.name}) between 1 and 120`),
  check('benches_runs_numbered', sql`${table.runsNumbered} >= 0`),
])
