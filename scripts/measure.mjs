/**
 * `node scripts/measure.mjs ADDRESS`: what a first visit loads from a served application, in bytes as sent with gzip.
 * Pages behind sign-in are read with a demo account, so the server must be on its own machine.
 */
import { execFileSync } from 'node:child_process'
import { brotliDecompressSync, gunzipSync, gzipSync } from 'node:zlib'
import http from 'node:http'
import { Refusal, reasonToExit, say } from './support/say.mjs'
import { ROOT } from './support/run.mjs'

/** JavaScript that a first visit to these may load, gzipped [bytes]. */
const LIMIT = 170_000
const PAGES = [{ path: '/sign-in', what: 'sign-in' }, { path: '/scenarios', what: 'list of scenarios' }]

/** One request; the body stays as it was sent. */
function get(address, headers = {}) {
  return new Promise((resolve, reject) => {
    http.get(address, { headers: { 'accept-encoding': 'gzip', ...headers } }, (answer) => {
      const pieces = []
      answer.on('data', piece => pieces.push(piece))
      answer.on('end', () => resolve({ status: answer.statusCode, headers: answer.headers, body: Buffer.concat(pieces) }))
    }).on('error', reject)
  })
}

function plain({ headers, body }) {
  if (headers['content-encoding'] === 'gzip') return gunzipSync(body)
  return headers['content-encoding'] === 'br' ? brotliDecompressSync(body) : body
}

/** Signs in as a demo person and returns the cookie. */
async function demoCookie(base) {
  const lines = execFileSync(process.execPath, ['--import', 'tsx', 'scripts/demo-accounts.ts'], { cwd: ROOT, encoding: 'utf8' })
  const passPhrase = /pass phrase for each: (\S+)/.exec(lines)?.[1]
  const mail = /(\S+@\S+\.example)/.exec(lines)?.[1]
  const answer = await fetch(`${base}/api/account/sign-in`, { method: 'POST', headers: { 'content-type': 'application/json', 'origin': base }, body: JSON.stringify({ mail, passPhrase }) })
  if (!answer.ok) throw new Refusal(`Signing in as ${mail} answered ${answer.status}.`)
  return answer.headers.getSetCookie().map(cookie => cookie.split(';')[0]).join('; ')
}

/** Scripts that a page names, and what those import without being asked. */
async function scriptsOf(base, path, cookie) {
  const page = await get(`${base}${path}`, cookie ? { cookie } : {})
  if (page.status !== 200) throw new Refusal(`${path} answered ${page.status}.`)
  const named = [...plain(page).toString().matchAll(/(?:src|href)="(\/_nuxt\/[^"]+\.js)"/g)].map(found => found[1])
  const seen = new Map()
  const queue = [...new Set(named)]
  while (queue.length) {
    const one = queue.pop()
    if (seen.has(one)) continue
    const answer = await get(`${base}${one}`)
    const text = plain(answer).toString()
    seen.set(one, { sent: answer.body.length, gzipped: answer.headers['content-encoding'] ? answer.body.length : gzipSync(answer.body).length, compressed: Boolean(answer.headers['content-encoding']) })
    // Only static imports: what import() asks for comes when it is needed.
    for (const found of text.matchAll(/(?:^|[;\n}])(?:import|export)(?:[\w$\s{},*]+from)?"(\.\/[^"]+\.js)"/g)) queue.push(`/_nuxt/${found[1].slice(2)}`)
  }
  return seen
}

async function main() {
  const base = process.argv[2]?.replace(/\/$/, '')
  if (!base) throw new Refusal('The address of a served application is wanted, such as http://127.0.0.1:3000.', 2)
  let cookie
  for (const { path, what } of PAGES) {
    const scripts = await scriptsOf(base, path, path === '/sign-in' ? undefined : cookie ??= await demoCookie(base))
    const bytes = [...scripts.values()].reduce((sum, one) => sum + one.gzipped, 0)
    const raw = [...scripts.values()].filter(one => !one.compressed && one.sent > 1500).length
    say(`${what}: ${(bytes / 1000).toFixed(1)} kB of JavaScript in ${scripts.size} files (gzip), ${bytes <= LIMIT ? 'within' : 'OVER'} ${LIMIT / 1000} kB${raw ? `; ${raw} files sent without compression` : ''}`)
    if (bytes > LIMIT) process.exitCode = 1
  }
}

main().catch((error) => {
  process.exitCode = reasonToExit(error)
})
