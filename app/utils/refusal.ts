/** Turns whatever a request threw into one shape, and that shape into a sentence. */
import type { FieldProblem, ProblemCode } from '#shared/schemas/problem'

export interface Refusal {
  code: ProblemCode | 'no_connection'
  status: number
  detail: string
  errors: FieldProblem[]
  current?: unknown
  retryAfterSeconds?: number
}

/** What a request throws when the answer was a refusal, or when there was no answer. */
export class ApiRefusal extends Error {
  constructor(readonly refusal: Refusal) { super(sentenceOf(refusal)) }
}

const WORDS: Partial<Record<Refusal['code'], string>> = {
  no_connection: 'No connection to the server. What you typed is kept on this page.',
  malformed_json: 'The server could not read what this page sent.',
  sign_in_first: 'You are signed out. Sign in again; what you typed is kept on this page.',
  wrong_sign_in: 'That address and pass phrase do not belong together here.',
  not_allowed: 'Your role on this bench does not allow this.',
  bad_origin: 'The request did not come from this page, so it was not carried out.',
  not_found: 'There is nothing here that you can read: it does not exist, is gone, or belongs to another bench.',
  already_there: 'This exists already.',
  moved_on: 'Somebody saved a newer revision meanwhile.',
  too_large: 'That is larger than the server takes.',
  wrong_type: 'The server does not take this type of content.',
  bad_input: 'Something in it cannot be taken as it stands.',
  if_match_missing: 'The revision that this edit was made from was not named.',
  too_many: 'Too many tries in a short time.',
  fault: 'The server failed at this. Nothing was stored half; try again.',
  database_away: 'The database does not answer at the moment. Nothing was stored half; try again in a few seconds.',
}

/** One sentence for a person; what the server said stands when it is more exact than ours. */
export function sentenceOf(refusal: Refusal): string {
  const said = refusal.detail.trim()
  const words = (refusal.code === 'rule_of_the_bench' || refusal.code === 'already_there') && said ? said : WORDS[refusal.code] ?? (said || 'The server refused this.')
  return refusal.retryAfterSeconds ? `${words} Try again in ${refusal.retryAfterSeconds} s.` : words
}

const CODE_OF_STATUS: Record<number, ProblemCode> = { 401: 'sign_in_first', 403: 'not_allowed', 404: 'not_found', 409: 'rule_of_the_bench', 412: 'moved_on', 413: 'too_large', 422: 'bad_input', 429: 'too_many', 503: 'database_away' }

/** Reads a thrown fetch error; anything without an answer counts as no connection. */
export function refusalOf(thrown: unknown): Refusal {
  if (thrown instanceof ApiRefusal) return thrown.refusal
  const { data, status, statusCode } = (thrown ?? {}) as { data?: unknown, status?: number, statusCode?: number }
  const code = status ?? statusCode
  if (!code) return { code: 'no_connection', status: 0, detail: '', errors: [] }
  const body = (typeof data === 'string' ? readJson(data) : data) as Partial<Refusal> | undefined
  return {
    code: body?.code ?? CODE_OF_STATUS[code] ?? 'fault',
    status: code,
    detail: body?.detail ?? '',
    errors: body?.errors ?? [],
    current: body?.current,
    retryAfterSeconds: body?.retryAfterSeconds,
  }
}

/** ofetch hands `application/problem+json` over as text in some versions. */
function readJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return undefined
  }
}
