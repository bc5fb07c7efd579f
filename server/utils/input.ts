/** What a handler reads from a request: body, query, path and headers, each judged before use. */
import { getHeader, getQuery, getRouterParam, type H3Event } from 'h3'
import type { z } from 'zod'
import { fieldProblems } from '../../shared/schemas/problem'
import { lookOver, readCapped } from './body'
import { badField, problem } from './problem'

function judge<Schema extends z.ZodType>(given: unknown, schema: Schema): z.output<Schema> {
  const parsed = schema.safeParse(given)
  if (!parsed.success) throw problem('bad_input', { errors: fieldProblems(parsed.error.issues).slice(0, 50) })
  return parsed.data
}

/** The bytes of a JSON body, capped, not parsed yet. `limitBytes` only where more than the usual is taken. */
export async function readRaw(event: H3Event, limitBytes = useRuntimeConfig(event).bodyLimitBytes): Promise<Buffer> {
  const type = (getHeader(event, 'content-type') ?? '').split(';')[0]!.trim().toLowerCase()
  const encoding = getHeader(event, 'content-encoding') ?? 'identity'
  if (type !== 'application/json' || encoding !== 'identity') throw problem('wrong_type')
  return readCapped(event, limitBytes)
}

/** The bytes of a file, capped; nothing is parsed. */
export async function readFile(event: H3Event, limitBytes: number): Promise<Buffer> {
  const type = (getHeader(event, 'content-type') ?? '').split(';')[0]!.trim().toLowerCase()
  if (type !== 'application/octet-stream' || (getHeader(event, 'content-encoding') ?? 'identity') !== 'identity') throw problem('wrong_type', { detail: 'A file is sent as application/octet-stream.' })
  const bytes = await readCapped(event, limitBytes)
  if (bytes.length === 0) throw badField('file', 'This file is empty: it has no rows.')
  return bytes
}

/** JSON body of a request, by schema. */
export async function readInput<Schema extends z.ZodType>(event: H3Event, schema: Schema): Promise<z.output<Schema>> {
  const raw = await readRaw(event)
  let parsed: unknown
  try {
    parsed = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(raw))
  } catch {
    throw problem('malformed_json')
  }
  lookOver(parsed)
  return judge(parsed, schema)
}

/** Query string, by schema. */
export function readQuery<Schema extends z.ZodType>(event: H3Event, schema: Schema): z.output<Schema> {
  const query = getQuery(event)
  lookOver(query)
  return judge(query, schema)
}

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/
/** An id from the path; what cannot be one answers as one that never existed. */
export function idParam(event: H3Event, name: string): string {
  const given = (getRouterParam(event, name) ?? '').toLowerCase()
  if (!UUID.test(given)) throw problem('not_found')
  return given
}
/** A revision number from the path. */
export function revisionParam(event: H3Event): number {
  const given = getRouterParam(event, 'revision') ?? ''
  if (!/^[1-9]\d{0,8}$/.test(given)) throw problem('not_found')
  return Number(given)
}

/** The revision that an edit was made from: If-Match: "4". */
export function requireIfMatch(event: H3Event): number {
  const given = getHeader(event, 'if-match')
  if (given === undefined) throw problem('if_match_missing')
  const match = /^(?:W\/)?"(\d{1,9})"$/.exec(given.trim())
  if (!match) throw badField('If-Match', 'The revision in quotes is wanted, for example "4".')
  return Number(match[1])
}

/** The client's own name of this attempt, so that a retry is seen as one. */
export function requireIdempotencyKey(event: H3Event): string {
  const given = getHeader(event, 'idempotency-key')?.trim() ?? ''
  if (!/^[\x21-\x7E]{1,200}$/.test(given)) throw badField('Idempotency-Key', 'A header Idempotency-Key of 1 to 200 visible ASCII characters is wanted.')
  return given
}
