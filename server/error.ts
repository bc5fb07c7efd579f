/** Every refusal of /api leaves here as RFC 9457 problem details; pages keep Nuxt's error page. No stack ever leaves. */
import { getRequestURL, setResponseHeaders, setResponseStatus, type H3Event } from 'h3'
import { isDatabaseAway } from './utils/database-away'
import { problem, Refusal } from './utils/problem'

/** What was thrown, as one of our own refusals. */
function refusalOf(error: unknown): Refusal {
  const thrown = error instanceof Error && error.cause instanceof Error ? error.cause : error
  if (thrown instanceof Refusal) return thrown
  if (isDatabaseAway(error)) return problem('database_away', { retryAfterSeconds: 2 })
  const status = (error as { statusCode?: number }).statusCode
  if (status === 404) return problem('not_found')
  if (status === 405) return problem('wrong_method')
  if (status === 400) return problem('malformed_json')
  return problem('fault')
}

export default async function writeProblem(error: unknown, event: H3Event) {
  if (event.handled || !/^\/api(\/|$)/.test(getRequestURL(event).pathname)) return
  const refusal = refusalOf(error)
  const body = refusal.toProblem()
  if (body.code === 'fault') console.error(`[fault] ${event.method} ${getRequestURL(event).pathname}`, error instanceof Error ? error.cause ?? error : error)
  if (event.node.res.headersSent) return
  setResponseStatus(event, body.status)
  setResponseHeaders(event, {
    'content-type': 'application/problem+json',
    'cache-control': 'no-store',
    ...(body.status === 401 && { 'www-authenticate': 'Session realm="Moorage"' }),
    ...(refusal.parts.allow && { allow: refusal.parts.allow }),
    ...(body.retryAfterSeconds !== undefined && { 'retry-after': Math.max(1, Math.ceil(body.retryAfterSeconds)) }),
    // What is left of an oversized body is not read for the sake of the next request.
    ...(body.status === 413 && { connection: 'close' }),
  })
  event.node.res.end(JSON.stringify(body))
}
