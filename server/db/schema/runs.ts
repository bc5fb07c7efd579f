/** Saved runs: what was asked, what was found, what the audit says. Immutable but for audit and bin. */
import { sql } from 'drizzle-orm'
import { boolean, check, doublePrecision, foreignKey, index, integer, jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core'
import type { Outcome } from '../../../shared/schemas/outcome'
import type { BenchHome } from '../../../shared/schemas/api/bench'
import type { Algorithm } from '../../../shared/walk/types'
import { benches } from './benches'
import { key, moment, now } from './columns'
import { scenarioRevisions } from './scenario-revisions'
import { users } from './users'

type LastRun = NonNullable<BenchHome['scenarios'][number]['lastRun']>
export type RunSummary = Pick<LastRun, 'ratio' | 'verdict' | 'classes' | 'curve'>

export const runs = pgTable('runs', {
  runId: key('run_id'),
  benchId: uuid('bench_id').notNull().references(() => benches.benchId),
  number: integer('number').notNull(),
  scenarioId: uuid('scenario_id').notNull(),
  revision: integer('revision').notNull(),
  seed: text('seed').notNull(),
  replicates: integer('replicates').notNull(),
  replicatesAsked: integer('replicates_asked').notNull(),
  partial: boolean('partial').notNull(),
  engineVersion: text('engine_version').notNull(),
  algorithm: text('algorithm').$type<Algorithm>().notNull(),
  outcome: jsonb('outcome').$type<Outcome>().notNull(),
  /** What lists show of the outcome, so that no list unpacks whole outcomes. */
  summary: jsonb('summary').$type<RunSummary>().notNull(),
  digest: text('digest').notNull(),
  /** How many blocks stand behind it. */
  blocks: integer('blocks').notNull(),
  durationMs: doublePrecision('duration_ms').notNull(),
  workers: integer('workers').notNull(),
  savedBy: uuid('saved_by').notNull().references(() => users.userId),
  savedAt: now('saved_at'),
  /** With its fingerprint of the body: a retry finds its run, another body under the same key is refused. */
  idempotencyKey: text('idempotency_key').notNull(),
  bodyHash: text('body_hash').notNull(),
  auditState: text('audit_state').$type<'waiting' | 'audited' | 'refused' | 'cannot'>().notNull().default('waiting'),
  auditBlocks: integer('audit_blocks').notNull().default(0),
  auditDetection: doublePrecision('audit_detection').notNull().default(0),
  auditAt: moment('audit_at'),
  deletedAt: moment('deleted_at'),
  deletedBy: uuid('deleted_by').references(() => users.userId),
}, table => [
  foreignKey({ columns: [table.scenarioId, table.revision], foreignColumns: [scenarioRevisions.scenarioId, scenarioRevisions.revision], name: 'runs_revision_fk' }),
  unique('runs_number_unique').on(table.benchId, table.number),
  unique('runs_idempotency_unique').on(table.savedBy, table.scenarioId, table.idempotencyKey),
  index('runs_scenario_index').on(table.scenarioId, table.number),
  index('runs_audit_index').on(table.auditState).where(sql`${table.auditState} = 'waiting'`),
  check('runs_replicates', sql`${table.replicates} between 1 and 50000 and ${table.replicatesAsked} >= ${table.replicates}`),
  check('runs_seed_length', sql`char_length(${table.seed}) between 1 and 200`),
  check('runs_digest', sql`${table.digest} ~ '^[0-9a-f]{64}$'`),
  check('runs_algorithm', sql`${table.algorithm} in ('stirred', 'attempt', 'touch', 'step')`),
  check('runs_audit_state', sql`${table.auditState} in ('waiting', 'audited', 'refused', 'cannot')`),
  check('runs_audit_detection', sql`${table.auditDetection} between 0 and 1`),
  check('runs_deleted', sql`(${table.deletedAt} is null) = (${table.deletedBy} is null)`),
])
