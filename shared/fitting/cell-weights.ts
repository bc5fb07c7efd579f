/** Means weighted by the covariance of their cells: points of one cell go up and down together. */
import type { ConditionData } from '../recordings/types'
import { cellCount, cellDirections, cellVariance, whitening, type CellVariance } from './cell-covariance'
import { refusal, type FitRefusal } from './refusals'

export interface CellWeights {
  /** σ, κ, δ of the cells, and Σ(cells − 1). */
  variance: CellVariance
  /** Inverse Cholesky factor of the covariance of each condition's means, row by row [1]. */
  factors: Float64Array[]
  /** Standard error of each mean: the root of the covariance's diagonal [1]. */
  errors: number[][]
}

/** A mean over cells: time [s], ratio [1], cells [count]. */
export interface CellMean { timeS: number, ratio: number, n: number | null }

/** Directions in which cells differ come from a fit of four parameters. */
const FEWEST_POINTS = 5

/**
 * Weights from the cells of all conditions together.
 * @param conditions - each with cells
 * @param means - points of each condition that count, sorted
 * @returns the weights, or why the cells cannot give them
 */
export function cellWeights(conditions: readonly ConditionData[], means: readonly (readonly CellMean[])[]): CellWeights | FitRefusal {
  const without = conditions.find(one => one.cells.length === 0)
  if (without) return refusal('no-cells', `“${without.condition}” was given as a summary; weights by cells need its cells.`)
  const few = means.findIndex(list => list.length < FEWEST_POINTS)
  if (few >= 0) return refusal('too-few-points', `“${conditions[few]!.condition}” has ${means[few]!.length} intervals; weights by cells need ${FEWEST_POINTS} or more.`)
  const times = means.map(list => Float64Array.from(list, point => point.timeS))
  const directions = means.map((list, c) => cellDirections(times[c]!, Float64Array.from(list, point => point.ratio), new Float64Array(list.length).fill(1)))
  const variance = cellVariance(conditions, directions)
  if (!variance || !(variance.sigma > 0)) return refusal('few-cells', 'There are too few cells, or too few intervals of each, to tell how cells differ. Weigh by SEM or by one pooled SD.')
  const { sigma, kappa, delta } = variance, factors: Float64Array[] = [], errors: number[][] = []
  conditions.forEach((condition, c) => {
    const { byRate, byDepletion } = directions[c]!, cells = Math.max(1, cellCount(condition, times[c]!))
    const scatter = Float64Array.from(means[c]!, mean => sigma / Math.sqrt(mean.n ?? cells))
    factors.push(whitening(scatter, directions[c]!, kappa, delta, cells))
    errors.push(Array.from(scatter, (error, i) => Math.sqrt(error ** 2 + ((kappa * byRate[i]!) ** 2 + (delta * byDepletion[i]!) ** 2) / cells)))
  })
  return { variance, factors, errors }
}
