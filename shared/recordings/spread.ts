/** SD and SEM of a point from what its row states: errors of several kinds, checked against each other. */
import { studentQuantile975 } from '../walk/normal'

/** What a row states, as fractions; null where it is missing. `rounding` is half a unit of the last digit. */
export interface StatedErrors {
  ratio: number
  n: number | null
  sd: { value: number, rounding: number } | null
  sem: { value: number, rounding: number } | null
  halfWidth: number | null
  lower: number | null
  upper: number | null
}
export type SpreadNote = 'n-one' | 'contradiction' | 'from-half-width' | 'from-limits' | 'lopsided-limits' | 'outside-limits' | 'unweighted'
export interface Spread { sd: number | null, sem: number | null, notes: SpreadNote[] }

/** SEM behind a 95 % half-width: Student's quantile where n is known, the normal one where it is not. */
const semOf = (halfWidth: number, n: number | null) => halfWidth / studentQuantile975(n === null ? Infinity : n - 1)

function fromLimits({ ratio, lower, upper, n }: StatedErrors): Spread | null {
  if (lower === null || upper === null) return null
  const half = (upper - lower) / 2, notes: SpreadNote[] = ['from-limits']
  if (ratio < lower || ratio > upper) notes.push('outside-limits')
  else if (Math.abs((upper + lower) / 2 - ratio) > 0.1 * half) notes.push('lopsided-limits')
  return completed(null, semOf(half, n), n, notes)
}

/** The missing one of SD and SEM, where n is known. */
function completed(sd: number | null, sem: number | null, n: number | null, notes: SpreadNote[]): Spread {
  if (n === null) return { sd, sem, notes }
  return { sd: sd ?? (sem === null ? null : sem * Math.sqrt(n)), sem: sem ?? (sd === null ? null : sd / Math.sqrt(n)), notes }
}

/**
 * SD and SEM of a mean. SD with n wins over an SEM that contradicts it by more than rounding; with n = 1 there is neither.
 * @param stated - what the row states, as fractions [1]
 * @returns SD and SEM [1], null where unknown, with what a person should know
 */
export function settleSpread(stated: StatedErrors): Spread {
  const { sd, sem, n, halfWidth } = stated
  if (n === 1) return { sd: null, sem: null, notes: ['n-one'] }
  if (sd && sem && n !== null) {
    const made = sd.value / Math.sqrt(n), slack = 1.001 * (sem.rounding + sd.rounding / Math.sqrt(n)) + 1e-12
    return Math.abs(made - sem.value) <= slack ? { sd: sd.value, sem: sem.value, notes: [] } : { sd: sd.value, sem: made, notes: ['contradiction'] }
  }
  if (sd && sem) return { sd: sd.value, sem: sem.value, notes: sem.value > sd.value ? ['contradiction'] : [] }
  if (sd || sem) return completed(sd?.value ?? null, sem?.value ?? null, n, sem || n !== null ? [] : ['unweighted'])
  if (halfWidth !== null) return completed(null, semOf(halfWidth, n), n, ['from-half-width'])
  return fromLimits(stated) ?? { sd: null, sem: null, notes: ['unweighted'] }
}

/**
 * What tells an SEM from an SD, said beside the column that was taken for one of them.
 * @param meaning - what the column was taken for
 * @param counts - n of the points [count]
 * @returns a sentence, or nothing where n says nothing
 */
export function errorSentence(meaning: 'sem' | 'sd', counts: (number | null)[]): string {
  const known = counts.filter((n): n is number => n !== null && n > 1).sort((a, b) => a - b), n = known[Math.floor(known.length / 2)]
  if (n === undefined) return ''
  return meaning === 'sem' ? ` An SD would be about ${Math.sqrt(n).toPrecision(2)} times larger with n of ${n}.` : ` An SEM would be about ${Math.sqrt(n).toPrecision(2)} times smaller with n of ${n}.`
}
