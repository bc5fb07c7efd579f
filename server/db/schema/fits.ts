/** Kept fits of a recording: what was asked, of which state of it, what was found. Written once. */
import { sql } from 'drizzle-orm'
import { check, index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { key, now } from './columns'
import { recordings } from './recordings'
import { users } from './users'

export const fits = pgTable('fits', {
  fitId: key('fit_id'),
  recordingId: uuid('recording_id').notNull().references(() => recordings.recordingId),
  /** Of the recording when it was fitted. */
  revision: integer('revision').notNull(),
  settings: jsonb('settings').$type<Record<string, unknown>>().notNull(),
  result: jsonb('result').$type<Record<string, unknown>>().notNull(),
  digest: text('digest').notNull(),
  savedBy: uuid('saved_by').notNull().references(() => users.userId),
  savedAt: now('saved_at'),
}, table => [
  index('fits_recording_index').on(table.recordingId, table.savedAt),
  check('fits_digest', sql`${table.digest} ~ '^[0-9a-f]{64}$'`),
])
