/** GET /api/health - ready only when the database answers. */
import { sql } from 'drizzle-orm'

export default defineEventHandler(async (event) => {
  publicRoute(event)
  await useDatabase().execute(sql`select 1`)
  return { ready: true }
})
