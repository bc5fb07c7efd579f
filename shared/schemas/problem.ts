/** RFC 9457 problem details: the one shape of every refusal. */

/** Stable codes for programs; the page writes the sentence. `type` of the answer is `urn:moorage:problem:<code>`. */
export const PROBLEM_STATUS = {
  malformed_json: 400, sign_in_first: 401, wrong_sign_in: 401, not_allowed: 403, bad_origin: 403, not_found: 404, wrong_method: 405,
  rule_of_the_bench: 409, already_there: 409, moved_on: 412, too_large: 413, wrong_type: 415, bad_input: 422, if_match_missing: 428,
  too_many: 429, fault: 500, database_away: 503,
} as const
export type ProblemCode = keyof typeof PROBLEM_STATUS
export interface FieldProblem { path: string, message: string }
export interface Problem { type: string, title: string, status: number, detail: string, code: ProblemCode, errors?: FieldProblem[], current?: unknown, retryAfterSeconds?: number }

interface Issue { code?: string, path: PropertyKey[], message: string, keys?: string[], expected?: string, values?: readonly unknown[], minimum?: number | bigint, maximum?: number | bigint }

const KINDS: Record<string, string> = { string: 'A text', number: 'A finite number', int: 'A whole number', boolean: 'True or false', array: 'A list', tuple: 'A list', object: 'An object' }
/** The library's own English, in our words; a sentence of a schema of ours stays. */
function ownWords(issue: Issue): string {
  const missing = issue.message.endsWith('received undefined')
  switch (issue.message.split(/[:,]/)[0]) {
    case 'Invalid input': return missing ? 'Missing.' : issue.values ? `One of: ${issue.values.join(', ')}.` : `${KINDS[issue.expected ?? ''] ?? 'Something else'} is wanted here.`
    case 'Invalid option': return `One of: ${(issue.values ?? []).join(', ')}.`
    case 'Too small': return `At least ${issue.minimum}.`
    case 'Too big': return `At most ${issue.maximum}.`
    default: return issue.message
  }
}
/** Full paths (`sites.0.attachProbability`); each unknown key is named on its own. */
export function fieldProblems(issues: readonly Issue[]): FieldProblem[] {
  return issues.flatMap(issue => issue.code === 'unrecognized_keys'
    ? (issue.keys ?? []).map(key => ({ path: [...issue.path, key].join('.'), message: 'Unknown field.' }))
    : [{ path: issue.path.join('.'), message: ownWords(issue) }])
}
