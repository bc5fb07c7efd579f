/** GET /api/schemas/:name - JSON Schema of a document, made from the schema that form, API, command line and worker read. */
import { documentSchemas } from '../../utils/openapi'

export default defineEventHandler((event) => {
  publicRoute(event)
  const found = documentSchemas()[getRouterParam(event, 'name') as 'scenario']
  if (!found) throw problem('not_found')
  setResponseHeader(event, 'content-type', 'application/schema+json')
  return found
})
