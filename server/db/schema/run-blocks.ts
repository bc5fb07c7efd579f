/** The integers behind a run's outcome, block by block. Immutable. */
import { sql } from 'drizzle-orm'
import { check, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import type { ReplicateBlock } from '../../../shared/walk/types'
import { runs } from './runs'

export const runBlocks = pgTable('run_blocks', {
  runId: uuid('run_id').notNull().references(() => runs.runId),
  position: integer('position').notNull(),
  digest: text('digest').notNull(),
  block: jsonb('block').$type<ReplicateBlock>().notNull(),
}, table => [
  primaryKey({ columns: [table.runId, table.position] }),
  check('run_blocks_digest', sql`${table.digest} ~ '^[0-9a-f]{64}$'`),
])
