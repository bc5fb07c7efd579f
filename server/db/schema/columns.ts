/** Columns that many tables share: time-ordered keys and timestamps with time zone. */
import { timestamp, uuid } from 'drizzle-orm/pg-core'
import { v7 } from 'uuid'

/** A UUIDv7: keys sort by the time they were made, so indexes grow at one end. */
export const key = (name: string) => uuid(name).primaryKey().$defaultFn(() => v7())
export const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date', precision: 3 })
export const now = (name: string) => moment(name).notNull().defaultNow()
