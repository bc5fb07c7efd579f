/** What was done, by whom and when: append only. The bench's "what changed" is read from here. */
import { index, integer, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { benches } from './benches'
import { key, now } from './columns'
import { recordings } from './recordings'
import { runs } from './runs'
import { scenarios } from './scenarios'
import { users } from './users'
import { weighUps } from './weigh-ups'

/** Kinds that the bench's home shows; the others are for the audit list. */
export const CHANGE_KINDS = ['scenario-created', 'revision-saved', 'scenario-binned', 'scenario-restored', 'run-saved', 'run-binned', 'recording-kept', 'recording-changed', 'recording-binned', 'weigh-up-saved', 'weigh-up-binned'] as const
export type AuditKind = typeof CHANGE_KINDS[number]
  | 'run-restored' | 'recording-restored' | 'weigh-up-restored' | 'fit-saved' | 'bench-created' | 'bench-renamed' | 'role-changed' | 'member-removed'
  | 'account-registered' | 'signed-in' | 'signed-out' | 'signed-out-everywhere' | 'run-audited' | 'run-refused' | 'demo-seeded'

export const auditEvents = pgTable('audit_events', {
  eventId: key('event_id'),
  kind: text('kind').$type<AuditKind>().notNull(),
  benchId: uuid('bench_id').references(() => benches.benchId),
  /** Null: the program itself. */
  actorId: uuid('actor_id').references(() => users.userId),
  scenarioId: uuid('scenario_id').references(() => scenarios.scenarioId),
  revision: integer('revision'),
  runId: uuid('run_id').references(() => runs.runId),
  recordingId: uuid('recording_id').references(() => recordings.recordingId),
  weighUpId: uuid('weigh_up_id').references(() => weighUps.weighUpId),
  /** The person whom it concerns, where that is another one. */
  subjectId: uuid('subject_id').references(() => users.userId),
  note: text('note').notNull().default(''),
  at: now('at'),
}, table => [
  index('audit_events_bench_index').on(table.benchId, table.eventId),
])
