/** Scenarios: the head of a line of immutable revisions. Title and times are kept here for the lists. */
import { sql } from 'drizzle-orm'
import { check, index, integer, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { benches } from './benches'
import { key, moment, now } from './columns'
import { users } from './users'

export const scenarios = pgTable('scenarios', {
  scenarioId: key('scenario_id'),
  benchId: uuid('bench_id').notNull().references(() => benches.benchId),
  title: text('title').notNull(),
  /** The newest revision. */
  revision: integer('revision').notNull(),
  createdBy: uuid('created_by').notNull().references(() => users.userId),
  updatedBy: uuid('updated_by').notNull().references(() => users.userId),
  createdAt: now('created_at'),
  updatedAt: now('updated_at'),
  deletedAt: moment('deleted_at'),
  deletedBy: uuid('deleted_by').references(() => users.userId),
}, table => [
  index('scenarios_updated_index').on(table.benchId, table.updatedAt, table.scenarioId),
  index('scenarios_created_index').on(table.benchId, table.createdAt, table.scenarioId),
  index('scenarios_title_index').on(table.benchId, sql`lower(${table.title})`, table.scenarioId),
  check('scenarios_title_length', sql`char_length(${table.title}) between 1 and 200`),
  check('scenarios_revision', sql`${table.revision} >= 1`),
  check('scenarios_deleted', sql`(${table.deletedAt} is null) = (${table.deletedBy} is null)`),
])
