/**
 * Covariance of means over cells: every cell has its own rates and its own depletion, so points of one cell go up and down together.
 * V = diag(σ²/n) + (κ² g gᵀ + δ² h hᵀ)/cells per condition, g = t·∂R/∂t (all rates of a cell scaled together), h = ∂R/∂d.
 */
import { log } from './elementary'
import type { CellPoint, ConditionData } from '../recordings/types'
import { fitLeastSquares, SEARCH } from './least-squares'
import { CURVES } from './weighing/curves'

/** Means of one condition with the directions in which its cells differ. */
export interface CellDirections {
  /** Rising [s]. */
  timesS: Float64Array
  /** t·∂R/∂t and ∂R/∂d of a smooth fit [1]. */
  byRate: Float64Array
  byDepletion: Float64Array
}

export interface CellVariance {
  /** SD of one cell's point about its own curve [1]. */
  sigma: number
  /** SD between cells of the logarithm of all rates, and of the depletion [1]. */
  kappa: number
  delta: number
  /** Σ(cells − 1) over conditions: what Student's t is read at. */
  dof: number
}

const STARTS = [[0.6, 1.2, 0.05], [0.13, 30, 0.4], [0.4, 3, 0.2], [0.5, 0.4, 0.02], [0.3, 8, 0.3]]
const MADE_FOR_LAST_S = 51.2

/**
 * Directions in which cells differ, by a free fit of two phases to one condition.
 * @param timesS - rising [s]
 * @param ratio - means [1]
 * @param error - standard errors, or any weights of one kind [1]
 * @returns g and h at each time
 */
export function cellDirections(timesS: Float64Array, ratio: Float64Array, error: Float64Array): CellDirections {
  const points = timesS.length, last = timesS[points - 1]!, unit = last > 0 ? last / MADE_FOR_LAST_S : 1, times = timesS.map(time => time / unit)
  const curve = new Float64Array(points), by = new Float64Array(4 * points)
  const evaluate = (at: Float64Array, residuals: Float64Array, jacobian: Float64Array | null) => {
    CURVES['site-kinds'](at, times, curve, by)
    for (let i = 0; i < points; i++) {
      residuals[i] = (curve[i]! - ratio[i]!) / error[i]!
      if (jacobian) for (let place = 0; place < 4; place++) jacobian[4 * i + place] = by[4 * i + place]! / error[i]!
    }
    return true
  }
  const problem = { points, parameters: 4, lower: [0, log(1e-4), log(1e-4), 0.02], upper: [1, log(200), log(200), 1], stepLimit: [Infinity, 3, 3, Infinity], evaluate }
  const depletion = Math.min(1, Math.max(0.05, 1 - ratio[0]!))
  const fits = STARTS.map(([share, quick, reluctant]) => fitLeastSquares(problem, [share!, log(quick!), log(reluctant!), depletion], SEARCH))
  const best = fits.reduce((least, one) => one.chi2 < least.chi2 ? one : least)
  CURVES['site-kinds'](best.parameters, times, curve, by)
  // All rates scaled together: the sum of the derivatives by their logarithms is t·∂R/∂t.
  return { timesS, byRate: Float64Array.from(timesS, (_, i) => by[4 * i + 1]! + by[4 * i + 2]!), byDepletion: Float64Array.from(timesS, (_, i) => by[4 * i + 3]!) }
}

/** Ratios of one cell, by places among the times of the means. */
export interface CellRow { at: number[], values: number[] }

/**
 * Ratios of each cell at the times of the means; lost ones and ones set aside are left out, repeats are averaged.
 * @param cells - of one condition
 * @param timesS - of its means [s]
 * @returns one row per cell, in order of appearance
 */
export function cellRows(cells: readonly CellPoint[], timesS: Float64Array): CellRow[] {
  const rows = new Map<string, Map<number, number[]>>(), places = new Map(Array.from(timesS, (time, i) => [Math.round(time * 1e6), i]))
  for (const { cell, intervalMs, ratio, aside } of cells) {
    const place = places.get(Math.round(intervalMs * 1e3))
    if (place === undefined || ratio === null || aside !== null) continue
    const row = rows.get(cell) ?? new Map<number, number[]>()
    rows.set(cell, row.set(place, [...row.get(place) ?? [], ratio]))
  }
  return [...rows.values()].map(row => ({ at: [...row.keys()], values: [...row.values()].map(repeats => repeats.reduce((sum, one) => sum + one, 0) / repeats.length) }))
}

/** Regression of one cell's deviations on g and h. */
function deviation({ at, values }: CellRow, means: Float64Array, { byRate, byDepletion }: CellDirections) {
  let gg = 0, gh = 0, hh = 0, gr = 0, hr = 0, rr = 0
  at.forEach((i, k) => {
    const g = byRate[i]!, h = byDepletion[i]!, r = values[k]! - means[i]!
    gg += g * g
    gh += g * h
    hh += h * h
    gr += g * r
    hr += h * r
    rr += r * r
  })
  const determinant = gg * hh - gh * gh
  if (at.length < 3 || !(determinant > 1e-12 * gg * hh)) return null
  const rate = (hh * gr - gh * hr) / determinant, depletion = (gg * hr - gh * gr) / determinant
  return { rate, depletion, left: Math.max(0, rr - rate * gr - depletion * hr), rateVariance: hh / determinant, depletionVariance: gg / determinant, points: at.length }
}

/**
 * Spread between cells and scatter within them, pooled over conditions.
 * @param conditions - with cells
 * @param directions - one per condition, at the times of its means
 * @returns σ, κ, δ; null where fewer than three cells or too few points are left to tell them
 */
export function cellVariance(conditions: readonly ConditionData[], directions: readonly CellDirections[]): CellVariance | null {
  let left = 0, leftDof = 0, rates = 0, depletions = 0, rateNoise = 0, depletionNoise = 0, dof = 0
  conditions.forEach((condition, c) => {
    const direction = directions[c]!, rows = cellRows(condition.cells, direction.timesS)
    const means = meansAt(rows, direction.timesS.length), regressed = rows.flatMap(row => deviation(row, means, direction) ?? []), cells = regressed.length
    if (cells < 2) return
    left += regressed.reduce((sum, one) => sum + one.left, 0)
    leftDof += regressed.reduce((sum, one) => sum + one.points, 0) - direction.timesS.length - 2 * (cells - 1)
    // Deviations from a mean of so many cells: sums of squares over cells − 1.
    const part = (cells - 1) / cells
    for (const one of regressed) {
      rates += one.rate ** 2
      depletions += one.depletion ** 2
      rateNoise += part * one.rateVariance
      depletionNoise += part * one.depletionVariance
    }
    dof += cells - 1
  })
  if (dof < 2 || leftDof < 2) return null
  const variance = left / leftDof, root = (squares: number, noise: number) => Math.sqrt(Math.max(0, (squares - variance * noise) / dof))
  return { sigma: Math.sqrt(variance), kappa: root(rates, rateNoise), delta: root(depletions, depletionNoise), dof }
}

function meansAt(rows: readonly CellRow[], points: number): Float64Array {
  const sums = new Float64Array(points), numbers = new Float64Array(points)
  for (const { at, values } of rows) at.forEach((i, k) => {
    sums[i]! += values[k]!
    numbers[i]! += 1
  })
  return sums.map((sum, i) => sum / numbers[i]!)
}

/**
 * Inverse Cholesky factor of V, by which residuals and derivatives are multiplied.
 * @param errors - standard error of each mean by scatter alone, σ/√n [1]
 * @param directions - g and h of the condition
 * @param kappa - SD between cells of the logarithm of all rates [1]
 * @param delta - SD between cells of the depletion [1]
 * @param cells - cells of the condition [count]
 * @returns points × points, row by row, lower triangle [1]
 */
export function whitening(errors: Float64Array, directions: CellDirections, kappa: number, delta: number, cells: number): Float64Array {
  const n = errors.length, factor = new Float64Array(n * n), inverse = new Float64Array(n * n), { byRate, byDepletion } = directions
  for (let i = 0; i < n; i++) for (let j = 0; j <= i; j++) {
    let value = (kappa ** 2 * byRate[i]! * byRate[j]! + delta ** 2 * byDepletion[i]! * byDepletion[j]!) / cells + (i === j ? errors[i]! ** 2 : 0)
    for (let k = 0; k < j; k++) value -= factor[i * n + k]! * factor[j * n + k]!
    factor[i * n + j] = i === j ? Math.sqrt(value) : value / factor[j * n + j]!
  }
  for (let column = 0; column < n; column++) {
    for (let i = column; i < n; i++) {
      let value = i === column ? 1 : 0
      for (let k = column; k < i; k++) value -= factor[i * n + k]! * inverse[k * n + column]!
      inverse[i * n + column] = value / factor[i * n + i]!
    }
  }
  return inverse
}

/** Cells that count in a condition [count]. */
export const cellCount = (condition: ConditionData, timesS: Float64Array): number => cellRows(condition.cells, timesS).length
