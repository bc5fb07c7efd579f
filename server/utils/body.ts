/** Reads a body with a cap before anything is parsed, and looks over what was parsed before a schema sees it. */
import type { H3Event } from 'h3'
import { badField, problem } from './problem'

/** No document of ours is deeper than 6. */
const DEPTH_LIMIT = 32
/** How long what is left of an oversized body is thrown away, so that the sender gets to read the answer [ms]. */
const DISCARD_MS = 5000

function refuseLarge(event: H3Event, limitBytes: number) {
  const { req } = event.node
  req.removeAllListeners('data')
  req.resume()
  const end = setTimeout(() => req.destroy(), DISCARD_MS)
  end.unref()
  req.once('close', () => clearTimeout(end))
  return problem('too_large', { detail: `At most ${limitBytes.toLocaleString('en')} bytes are taken here.` })
}

/** The bytes of the body; never holds more than the limit. */
export async function readCapped(event: H3Event, limitBytes: number): Promise<Buffer> {
  const { req } = event.node
  if (Number(req.headers['content-length'] ?? 0) > limitBytes) throw refuseLarge(event, limitBytes)
  // Requests that the server makes to itself while rendering carry their body as it is.
  const given = (req as { body?: unknown }).body
  if (given !== undefined) return Buffer.from(typeof given === 'string' || given instanceof Uint8Array ? given as string : JSON.stringify(given))
  return new Promise((resolve, reject) => {
    const chunks: Buffer[] = []
    let size = 0
    req.on('data', (chunk: Buffer) => {
      size += chunk.length
      if (size > limitBytes) return reject(refuseLarge(event, limitBytes))
      chunks.push(chunk)
    })
    req.once('end', () => resolve(Buffer.concat(chunks)))
    req.once('error', reject)
    req.once('aborted', () => reject(problem('malformed_json', { detail: 'The body broke off.' })))
  })
}

/** Refuses nesting that no document has, and text that PostgreSQL cannot keep; walks without recursion. */
export function lookOver(parsed: unknown): void {
  const open: { value: unknown, path: string, depth: number }[] = [{ value: parsed, path: '', depth: 0 }]
  for (let next = open.pop(); next; next = open.pop()) {
    const { value, path, depth } = next
    if (typeof value === 'string') refuseText(value, path)
    if (typeof value !== 'object' || value === null) continue
    if (depth >= DEPTH_LIMIT) throw badField(path.split('.').slice(0, 8).join('.'), `Nested deeper than ${DEPTH_LIMIT} levels.`)
    if (Array.isArray(value) && typeof value[0] === 'number') continue
    for (const [name, inner] of Object.entries(value)) {
      if (typeof inner === 'number') continue
      refuseText(name, path)
      open.push({ value: inner, path: path ? `${path}.${name}` : name, depth: depth + 1 })
    }
  }
}

/** NUL and half a surrogate pair cannot be stored as text. */
function refuseText(text: string, path: string) {
  if (text.includes('\u0000')) throw badField(path, 'A NUL character cannot be kept.')
  if (/\p{Surrogate}/u.test(text)) throw badField(path, 'Half of a surrogate pair cannot be kept.')
}
