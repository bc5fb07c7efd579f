/** GET /api/schemas/:name - JSON Schema of a document, made from the schema that form, API, command line and worker read. */
import { documentSchemas } from '../../utils/openapi'

export default defineEventHandler((event) => {
  publicRoute(event)
  const name = getRouterParam(event, 'name')!
  const found = Object.hasOwn(documentSchemas(), name) ? documentSchemas()[name as 'scenario'] : undefined
  if (!found) throw problem('not_found')
  setResponseHeader(event, 'content-type', 'application/schema+json')
  return found
})
