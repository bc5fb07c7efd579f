/** Saved states of a scenario. Immutable: neither the application's role nor anyone else changes or removes a row. */
import { sql } from 'drizzle-orm'
import { check, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import type { Scenario } from '../../../shared/schemas/scenario'
import { now } from './columns'
import { scenarios } from './scenarios'
import { users } from './users'

export const scenarioRevisions = pgTable('scenario_revisions', {
  scenarioId: uuid('scenario_id').notNull().references(() => scenarios.scenarioId),
  revision: integer('revision').notNull(),
  document: jsonb('document').$type<Scenario>().notNull(),
  digest: text('digest').notNull(),
  authorId: uuid('author_id').notNull().references(() => users.userId),
  message: text('message').notNull().default(''),
  savedAt: now('saved_at'),
}, table => [
  primaryKey({ columns: [table.scenarioId, table.revision] }),
  check('scenario_revisions_revision', sql`${table.revision} >= 1`),
  check('scenario_revisions_digest', sql`${table.digest} ~ '^[0-9a-f]{64}$'`),
  check('scenario_revisions_message', sql`char_length(${table.message}) <= 500`),
])
