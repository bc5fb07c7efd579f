/** The revision as a quoted ETag: what If-Match of the next edit must name. */
import { setResponseHeader, type H3Event } from 'h3'

export function withEtag<Answer extends { revision: number }>(event: H3Event, answer: Answer): Answer {
  setResponseHeader(event, 'etag', `"${answer.revision}"`)
  return answer
}
