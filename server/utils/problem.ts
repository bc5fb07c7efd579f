/** The one shape of every refusal. Services and handlers throw it; the error handler writes it as RFC 9457 problem details. */
import { PROBLEM_STATUS, type FieldProblem, type Problem, type ProblemCode } from '../../shared/schemas/problem'

/** What is said when the place that refuses has nothing more exact to say. */
const DETAIL: Record<ProblemCode, string> = {
  malformed_json: 'The body is not JSON that can be read.',
  sign_in_first: 'This needs an account: sign in first.',
  wrong_sign_in: 'This mail address and pass phrase do not belong together.',
  not_allowed: 'Your role on this bench does not allow this.',
  bad_origin: 'A change must come from Moorage\'s own pages: the request names another origin, or none.',
  not_found: 'Nothing that you may see is here.',
  wrong_method: 'This address does not take this method.',
  rule_of_the_bench: 'A rule of the bench does not allow this.',
  already_there: 'This is there already.',
  moved_on: 'Someone saved a newer revision in the meantime.',
  too_large: 'The body is larger than allowed.',
  wrong_type: 'The body must be sent as application/json.',
  bad_input: 'Something in the input is not as wanted; each field is named.',
  if_match_missing: 'Send the revision you started from as If-Match: "<revision>".',
  too_many: 'Too many attempts. Wait a little, then try again.',
  fault: 'Something went wrong on the server. Nothing was stored.',
  database_away: 'The database does not answer at the moment. Nothing was stored; try again shortly.',
}
const TITLE: Record<ProblemCode, string> = {
  malformed_json: 'Malformed JSON', sign_in_first: 'Sign in first', wrong_sign_in: 'Sign-in refused', not_allowed: 'Not allowed',
  bad_origin: 'Foreign origin', not_found: 'Not found', wrong_method: 'Method not allowed', rule_of_the_bench: 'Rule of the bench',
  already_there: 'Already there', moved_on: 'Moved on', too_large: 'Too large', wrong_type: 'Wrong content type', bad_input: 'Bad input',
  if_match_missing: 'If-Match missing', too_many: 'Too many attempts', fault: 'Fault', database_away: 'Database away',
}

export interface RefusalParts { detail?: string, errors?: FieldProblem[], current?: unknown, retryAfterSeconds?: number, allow?: string }

export class Refusal extends Error {
  constructor(readonly code: ProblemCode, readonly parts: RefusalParts = {}) {
    super(parts.detail ?? DETAIL[code])
    this.name = 'Refusal'
  }

  /** The body of the answer. */
  toProblem(): Problem {
    const { errors, current, retryAfterSeconds } = this.parts
    return {
      type: `urn:moorage:problem:${this.code}`, title: TITLE[this.code], status: PROBLEM_STATUS[this.code], detail: this.message, code: this.code,
      ...(errors && { errors }), ...(current !== undefined && { current }), ...(retryAfterSeconds !== undefined && { retryAfterSeconds }),
    }
  }
}

/** Usage: `throw problem('not_found')`. */
export const problem = (code: ProblemCode, parts?: RefusalParts): Refusal => new Refusal(code, parts)
/** One field that is not as wanted. */
export const badField = (path: string, message: string): Refusal => new Refusal('bad_input', { errors: [{ path, message }] })
