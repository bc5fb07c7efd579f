/** GET /api/health - ready only when the database answers. */
import { askDatabase } from '../services/health'

export default defineEventHandler(async (event) => {
  publicRoute(event)
  await askDatabase(useDatabase())
  return { ready: true }
})
