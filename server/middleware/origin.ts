/** A change is taken only from our own pages: a cookie alone, sent along by a foreign page, is not enough. */
import { getHeader, getRequestHost, getRequestURL } from 'h3'

const READING = new Set(['GET', 'HEAD', 'OPTIONS'])

export default defineEventHandler((event) => {
  const { pathname } = getRequestURL(event)
  if (!/^\/api(\/|$)/.test(pathname)) return
  // The session module's own addresses are not part of the interface, and nothing stands at its root.
  if (/^\/api\/?$/.test(pathname) || pathname.startsWith('/api/_auth/')) throw problem('not_found')
  setResponseHeader(event, 'cache-control', 'no-store')
  if (READING.has(event.method)) return
  // Browsers set Sec-Fetch-Site themselves and let no page change it; where it is missing, Origin must name this host.
  const site = getHeader(event, 'sec-fetch-site')
  if (site === undefined ? !namesThisHost(getHeader(event, 'origin'), getRequestHost(event)) : site !== 'same-origin') throw problem('bad_origin')
})

function namesThisHost(origin: string | undefined, host: string): boolean {
  try {
    return origin !== undefined && new URL(origin).host === host
  } catch {
    return false
  }
}
