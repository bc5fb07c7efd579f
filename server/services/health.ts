/** Whether the database answers. */
import { sql } from 'drizzle-orm'
import type { Handle } from '../db/client'

/** Throws what the driver throws when it does not. */
export async function askDatabase(db: Handle): Promise<void> {
  await db.execute(sql`select 1`)
}
