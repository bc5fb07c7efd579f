/** Tags of scenarios. They belong to the scenario, not to a revision. */
import { sql } from 'drizzle-orm'
import { check, index, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import { scenarios } from './scenarios'

export const tags = pgTable('tags', {
  scenarioId: uuid('scenario_id').notNull().references(() => scenarios.scenarioId, { onDelete: 'cascade' }),
  tag: text('tag').notNull(),
}, table => [
  primaryKey({ columns: [table.scenarioId, table.tag] }),
  index('tags_tag_index').on(table.tag),
  check('tags_tag_length', sql`char_length(${table.tag}) between 1 and 40`),
])
