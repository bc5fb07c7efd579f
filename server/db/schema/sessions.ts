/** Signed-in browsers. The cookie carries a random key; only its hash is kept, and it is looked up at every request. */
import { index, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { key, moment, now } from './columns'
import { users } from './users'

export const sessions = pgTable('sessions', {
  sessionId: key('session_id'),
  userId: uuid('user_id').notNull().references(() => users.userId, { onDelete: 'cascade' }),
  keyHash: text('key_hash').notNull().unique('sessions_key_unique'),
  agent: text('agent').notNull().default(''),
  startedAt: now('started_at'),
  lastSeenAt: now('last_seen_at'),
  expiresAt: moment('expires_at').notNull(),
}, table => [index('sessions_user_index').on(table.userId, table.startedAt)])
