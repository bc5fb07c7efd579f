/** Recordings: one condition of a file, with every decision that was made when it was read. */
import { sql } from 'drizzle-orm'
import { check, doublePrecision, index, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import type { RecordingDetails, RecordingReading } from '../../../shared/schemas/recording'
import { benches } from './benches'
import { key, moment, now } from './columns'
import { uploads } from './uploads'
import { users } from './users'

export const recordings = pgTable('recordings', {
  recordingId: key('recording_id'),
  benchId: uuid('bench_id').notNull().references(() => benches.benchId),
  uploadId: uuid('upload_id').notNull().references(() => uploads.uploadId),
  title: text('title').notNull(),
  condition: text('condition').notNull(),
  protocol: text('protocol').notNull(),
  manipulation: text('manipulation').notNull(),
  kind: text('kind').$type<'summary' | 'cells' | 'trace'>().notNull(),
  /** How the file was read: choices, answers, what was set aside. */
  reading: jsonb('reading').$type<RecordingReading>().notNull(),
  details: jsonb('details').$type<RecordingDetails>().notNull(),
  notes: text('notes').notNull().default(''),
  /** Counts changes of details and of points set aside. */
  revision: integer('revision').notNull().default(1),
  createdBy: uuid('created_by').notNull().references(() => users.userId),
  updatedBy: uuid('updated_by').notNull().references(() => users.userId),
  createdAt: now('created_at'),
  updatedAt: now('updated_at'),
  deletedAt: moment('deleted_at'),
  deletedBy: uuid('deleted_by').references(() => users.userId),
}, table => [
  index('recordings_updated_index').on(table.benchId, table.updatedAt, table.recordingId),
  check('recordings_title_length', sql`char_length(${table.title}) between 1 and 200`),
  check('recordings_kind', sql`${table.kind} in ('summary', 'cells', 'trace')`),
  check('recordings_revision', sql`${table.revision} >= 1`),
  check('recordings_deleted', sql`(${table.deletedAt} is null) = (${table.deletedBy} is null)`),
])

/** One measured row: a mean where `cell` is null, else one cell at one interval. */
export const recordingPoints = pgTable('recording_points', {
  recordingId: uuid('recording_id').notNull().references(() => recordings.recordingId),
  position: integer('position').notNull(),
  cell: text('cell'),
  intervalMs: doublePrecision('interval_ms').notNull(),
  /** Null: the cell was lost at this interval. */
  ratio: doublePrecision('ratio'),
  sd: doublePrecision('sd'),
  sem: doublePrecision('sem'),
  n: integer('n'),
  /** First response in the file's own unit. */
  first: doublePrecision('first'),
  /** Why it stays out of fits; null where it counts. */
  aside: text('aside'),
  line: integer('line'),
}, table => [
  primaryKey({ columns: [table.recordingId, table.position] }),
  check('recording_points_interval', sql`${table.intervalMs} >= 0`),
  check('recording_points_n', sql`${table.n} is null or ${table.n} >= 1`),
  check('recording_points_error', sql`(${table.sd} is null or ${table.sd} >= 0) and (${table.sem} is null or ${table.sem} >= 0)`),
  check('recording_points_aside', sql`${table.aside} is null or char_length(${table.aside}) between 1 and 200`),
])

export const recordingTags = pgTable('recording_tags', {
  recordingId: uuid('recording_id').notNull().references(() => recordings.recordingId, { onDelete: 'cascade' }),
  tag: text('tag').notNull(),
}, table => [
  primaryKey({ columns: [table.recordingId, table.tag] }),
  check('recording_tags_length', sql`char_length(${table.tag}) between 1 and 40`),
])

/** How files of one shape were read last: offered for the next of the same shape. */
export const mappings = pgTable('mappings', {
  benchId: uuid('bench_id').notNull().references(() => benches.benchId),
  shape: text('shape').notNull(),
  choices: jsonb('choices').$type<Record<string, unknown>>().notNull(),
  savedBy: uuid('saved_by').notNull().references(() => users.userId),
  savedAt: now('saved_at'),
}, table => [primaryKey({ columns: [table.benchId, table.shape] })])
