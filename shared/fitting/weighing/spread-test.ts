/** Whether cells differ as a spread of rates between cells would have it: judged by the SD between cells, not by the curve. */
import { exp } from '../elementary'
import { spreadVariance } from './curves'
import { JointProblem, type TypedDepletion } from './joint-problem'
import type { WeighData } from './prepare'
import type { Found } from './search'

export const SPREAD_EXCLUDED_BELOW = 0.15
export const SPREAD_SUPPORTED_ABOVE = 0.5
/** Above it the fitted spread is too narrow to be what makes cells differ (a curve that is no spread has hardly any). */
export const SPREAD_TOO_NARROW_ABOVE = 2

export interface SpreadTest {
  /** Σ(n − 1)·SD² seen over what the fitted spread would give [1]. */
  q: number
  reading: 'inside-cells' | 'open' | 'between-cells'
}

/**
 * Compares the SD between cells with the one that the fitted spread predicts, were it a spread between cells.
 * @param spread - best fit of the spread
 * @param data - that it was fitted to
 * @param typed - depletions that were not fitted
 * @returns the ratio and its reading; null where no point has SD and n, or no spread was fitted
 */
export function testSpread(spread: Found | undefined, data: WeighData, typed: TypedDepletion): SpreadTest | null {
  if (!spread) return null
  const problem = new JointProblem(spread.model, data.conditions, spread.layout, typed)
  let seen = 0, predicted = 0
  data.conditions.forEach((one, c) => {
    const [logMedian, variance, depletion] = problem.localOf(spread.parameters, c) as unknown as [number, number, number]
    for (let i = 0; i < one.times.length; i++) {
      const sd = one.sd[i]!, n = one.n[i]!
      if (!Number.isFinite(sd) || !(n >= 2)) continue
      seen += (n - 1) * sd * sd
      predicted += (n - 1) * depletion ** 2 * spreadVariance(exp(logMedian), variance, one.times[i]!)
    }
  })
  if (seen === 0 && predicted === 0) return null
  const q = predicted > 0 ? Math.min(seen / predicted, 1e6) : 1e6
  return { q, reading: q < SPREAD_EXCLUDED_BELOW ? 'inside-cells' : q > SPREAD_SUPPORTED_ABOVE && q <= SPREAD_TOO_NARROW_ABOVE ? 'between-cells' : 'open' }
}
