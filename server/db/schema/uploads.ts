/** Files as they came: the bytes are kept unchanged and can be downloaded again. */
import { sql } from 'drizzle-orm'
import { check, customType, index, integer, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { benches } from './benches'
import { key, now } from './columns'
import { users } from './users'

const bytea = customType<{ data: Buffer, driverData: Buffer }>({ dataType: () => 'bytea' })

export const uploads = pgTable('uploads', {
  uploadId: key('upload_id'),
  benchId: uuid('bench_id').notNull().references(() => benches.benchId),
  fileName: text('file_name').notNull(),
  size: integer('size').notNull(),
  sha256: text('sha256').notNull(),
  bytes: bytea('bytes').notNull(),
  uploadedBy: uuid('uploaded_by').notNull().references(() => users.userId),
  uploadedAt: now('uploaded_at'),
}, table => [
  index('uploads_hash_index').on(table.benchId, table.sha256),
  check('uploads_size', sql`${table.size} between 1 and 26214400 and octet_length(${table.bytes}) = ${table.size}`),
  check('uploads_hash', sql`${table.sha256} ~ '^[0-9a-f]{64}$'`),
  check('uploads_name_length', sql`char_length(${table.fileName}) between 1 and 255`),
])
