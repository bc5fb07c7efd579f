/** What one fit is held against another with: information criteria, their weights, nested tests. */
import { exp, log } from './elementary'
import { chiSquaredAbove, fAbove } from './tails'

/**
 * Divisor of χ² where the errors given do not explain the scatter: max(1, χ²/dof) of the best fit.
 * @param chi2 - of the best fit [1]
 * @param dof - its degrees of freedom; without any the divisor is 1 [1]
 * @returns s [1]
 */
export const excessScatter = (chi2: number, dof: number): number => dof > 0 ? Math.max(1, chi2 / dof) : 1

/**
 * Criterion where errors are known: χ²/s + 2k, no small-sample term.
 * @param chi2 - of the fit [1]
 * @param scale - s of the best fit among those compared [1]
 * @param parameters - free parameters of the mean [1]
 * @returns the criterion; smaller is better [1]
 */
export const knownErrorCriterion = (chi2: number, scale: number, parameters: number): number => chi2 / scale + 2 * parameters

/**
 * Criteria where the errors are estimated from the scatter itself: AIC = n·ln(RSS/n) + 2k, BIC, and AICc (Hurvich & Tsai 1989, Biometrika 76:297).
 * @param points - n [1]
 * @param rss - residual sum of squares [1]
 * @param parameters - k, the error variance counted among them [1]
 * @returns AIC, BIC; AICc is null where n ≤ k + 1 leaves it undefined [1]
 */
export function scatterCriteria(points: number, rss: number, parameters: number): { aic: number, aicc: number | null, bic: number } {
  const fit = points * log(rss / points), aic = fit + 2 * parameters
  return { aic, aicc: points > parameters + 1 ? aic + 2 * parameters * (parameters + 1) / (points - parameters - 1) : null, bic: fit + parameters * log(points) }
}

/**
 * Akaike weights (Burnham & Anderson 2002): exp(−Δ/2), made to sum to 1.
 * @param criteria - one value per candidate [1]
 * @returns weight of each [1]
 */
export function akaikeWeights(criteria: readonly number[]): number[] {
  const least = Math.min(...criteria), raw = criteria.map(value => exp((least - value) / 2))
  const sum = raw.reduce((total, one) => total + one, 0)
  return raw.map(one => one / sum)
}

/**
 * F test of a model inside a richer one.
 * @param smaller - residual sum of squares and free parameters of the smaller model [1]
 * @param richer - the same of the richer one [1]
 * @param points - n [1]
 * @returns F and its tail [1]
 */
export function nestedF(smaller: { rss: number, parameters: number }, richer: { rss: number, parameters: number }, points: number): { f: number, p: number } {
  const more = richer.parameters - smaller.parameters, left = points - richer.parameters
  const f = (smaller.rss - richer.rss) / more / (richer.rss / left)
  return { f, p: fAbove(f, more, left) }
}

/**
 * Tail of the boundary law of a likelihood ratio: an even mixture of χ² with `parameters − 1` and `parameters` degrees of freedom (Self & Liang 1987, JASA 82:605).
 * @param statistic - likelihood ratio [1]
 * @param parameters - extra parameters, one of them on its boundary [1]
 * @returns P(X ≥ statistic) [1]
 */
export function boundaryTail(statistic: number, parameters: number): number {
  const fewer = parameters > 1 ? chiSquaredAbove(statistic, parameters - 1) : statistic > 0 ? 0 : 1
  return (fewer + chiSquaredAbove(statistic, parameters)) / 2
}
