/** One or two exponentials of recovery, R(t) = plateau − depletion·G(t), with derivatives; times in s. */
import { exp, log } from './elementary'

export type ExponentialModel = 'one' | 'two'
export type ParameterName = 'plateau' | 'depletion' | 'fastShare' | 'tauS' | 'tauFastS' | 'tauSlowS'

/** Places in the vector that a curve is made of. Time constants stand as logarithms there, so that they stay above 0. */
export const PLACE = { plateau: 0, depletion: 1, fastShare: 2, logTauFast: 3, logTauSlow: 4 } as const
export const PLACES = 5

/**
 * Ratio of second to first response: G = w·exp(−t/τ₁) + (1 − w)·exp(−t/τ₂); one exponential has w = 1.
 * @param at - plateau, depletion, w [1], ln τ₁, ln τ₂ (τ in s)
 * @param timeS - end of the first stimulus to the start of the second [s]
 * @param by - where given, takes the five derivatives, in the order of `at` [1]
 * @returns the ratio [1]
 */
export function recoveryAt(at: ArrayLike<number>, timeS: number, by?: Float64Array | null): number {
  const plateau = at[0]!, depletion = at[1]!, share = at[2]!
  const fastAge = timeS * exp(-at[3]!), fast = exp(-fastAge)
  const slowAge = share === 1 ? 0 : timeS * exp(-at[4]!), slow = share === 1 ? 0 : exp(-slowAge)
  const empty = share * fast + (1 - share) * slow
  if (by) {
    by[0] = 1
    by[1] = -empty
    by[2] = -depletion * (fast - slow)
    by[3] = -depletion * share * fastAge * fast
    by[4] = -depletion * (1 - share) * slowAge * slow
  }
  return plateau - depletion * empty
}

/** The curve that a fit's parameters and held values stand for. */
export interface NamedValue { name: ParameterName, value: number }

/**
 * The curve of a fit, for drawing.
 * @param values - parameters and held values of one condition, by name [1, s]
 * @param timesS - intervals [s]
 * @returns ratio at each interval [1]
 */
export function recoveryCurve(values: readonly NamedValue[], timesS: readonly number[]): number[] {
  const of = (name: ParameterName) => values.find(one => one.name === name)?.value
  const plateau = of('plateau') ?? 1, tau = of('tauS') ?? of('tauFastS')
  if (tau === undefined) throw new RangeError('A time constant is wanted.')
  const at = [plateau, of('depletion') ?? plateau, of('fastShare') ?? 1, log(tau), log(of('tauSlowS') ?? tau)]
  return timesS.map(time => recoveryAt(at, time))
}
