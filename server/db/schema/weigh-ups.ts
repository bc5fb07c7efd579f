/** Weigh-ups: the head, and its immutable versions with the data they were made from. */
import { sql } from 'drizzle-orm'
import { check, index, integer, jsonb, pgTable, primaryKey, text, unique, uuid } from 'drizzle-orm/pg-core'
import type { ConditionData } from '../../../shared/recordings/types'
import { benches } from './benches'
import { key, moment, now } from './columns'
import { users } from './users'

export const weighUps = pgTable('weigh_ups', {
  weighUpId: key('weigh_up_id'),
  benchId: uuid('bench_id').notNull().references(() => benches.benchId),
  number: integer('number').notNull(),
  title: text('title').notNull(),
  /** The newest version. */
  version: integer('version').notNull(),
  createdBy: uuid('created_by').notNull().references(() => users.userId),
  updatedBy: uuid('updated_by').notNull().references(() => users.userId),
  createdAt: now('created_at'),
  updatedAt: now('updated_at'),
  deletedAt: moment('deleted_at'),
  deletedBy: uuid('deleted_by').references(() => users.userId),
}, table => [
  unique('weigh_ups_number_unique').on(table.benchId, table.number),
  index('weigh_ups_updated_index').on(table.benchId, table.updatedAt, table.weighUpId),
  check('weigh_ups_title_length', sql`char_length(${table.title}) between 1 and 200`),
  check('weigh_ups_deleted', sql`(${table.deletedAt} is null) = (${table.deletedBy} is null)`),
])

export const weighUpVersions = pgTable('weigh_up_versions', {
  weighUpId: uuid('weigh_up_id').notNull().references(() => weighUps.weighUpId),
  version: integer('version').notNull(),
  /** Which recordings in which state. */
  inputs: jsonb('inputs').$type<{ recordingId: string, revision: number }[]>().notNull(),
  /** The data as they stood then: weighing again needs nothing else. */
  data: jsonb('data').$type<ConditionData[]>().notNull(),
  settings: jsonb('settings').$type<Record<string, unknown>>().notNull(),
  result: jsonb('result').$type<Record<string, unknown>>().notNull(),
  digest: text('digest').notNull(),
  savedBy: uuid('saved_by').notNull().references(() => users.userId),
  savedAt: now('saved_at'),
}, table => [
  primaryKey({ columns: [table.weighUpId, table.version] }),
  check('weigh_up_versions_version', sql`${table.version} >= 1`),
  check('weigh_up_versions_digest', sql`${table.digest} ~ '^[0-9a-f]{64}$'`),
])
