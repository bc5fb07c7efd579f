/** Who belongs to a bench, and in which role. */
import { sql } from 'drizzle-orm'
import { check, index, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import type { Role } from '../../../shared/permissions'
import { benches } from './benches'
import { now } from './columns'
import { users } from './users'

export const memberships = pgTable('memberships', {
  benchId: uuid('bench_id').notNull().references(() => benches.benchId, { onDelete: 'cascade' }),
  userId: uuid('user_id').notNull().references(() => users.userId, { onDelete: 'cascade' }),
  role: text('role').$type<Role>().notNull(),
  since: now('since'),
}, table => [
  primaryKey({ columns: [table.benchId, table.userId] }),
  index('memberships_user_index').on(table.userId),
  check('memberships_role', sql`${table.role} in ('lead', 'member', 'trainee', 'guest')`),
])
