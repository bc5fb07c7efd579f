/** GET /api/openapi.json - the interface described, made from the table of routes. */
import { openApiDocument } from '../utils/openapi'

export default defineEventHandler((event) => {
  publicRoute(event)
  return openApiDocument()
})
