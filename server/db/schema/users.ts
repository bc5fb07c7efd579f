/** People: one row a mail address, kept in lower case. */
import { sql } from 'drizzle-orm'
import { boolean, check, integer, pgTable, text } from 'drizzle-orm/pg-core'
import { key, moment, now } from './columns'

export const users = pgTable('users', {
  userId: key('user_id'),
  mail: text('mail').notNull().unique('users_mail_unique'),
  name: text('name').notNull(),
  /** scrypt in PHC form; its cost stands in it, so that a raised cost is taken up at the next sign-in. */
  passHash: text('pass_hash').notNull(),
  /** Wrong pass phrases since the last sign-in: the owner is told at the next one. */
  failedSignIns: integer('failed_sign_ins').notNull().default(0),
  lastFailedAt: moment('last_failed_at'),
  /** An invented person with a published pass phrase: may sign in only where the server is told so, which is on loopback. */
  demo: boolean('demo').notNull().default(false),
  createdAt: now('created_at'),
}, table => [
  check('users_mail_lower', sql`${table.mail} = lower(${table.mail}) and char_length(${table.mail}) between 3 and 254`),
  check('users_name_length', sql`char_length(${table.name}) between 1 and 100`),
])
