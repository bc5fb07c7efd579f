/** Levenberg–Marquardt by orthogonal factors, with simple bounds: the one engine behind fits and weigh-ups. */
import { backSubstitute, triangularise } from './orthogonal'

/** Weighted residuals of a model and their derivatives. */
export interface LeastSquaresProblem {
  /** Number of residuals and of parameters [1]. */
  points: number
  parameters: number
  lower?: readonly number[]
  upper?: readonly number[]
  /** Longest step of a parameter in one iteration [unit of the parameter]. */
  stepLimit?: readonly number[]
  /**
   * Writes residuals, and row by row (points × parameters) their derivatives where a Jacobian is given.
   * Returns false where the model is not defined: the step is then refused and shortened.
   */
  evaluate(at: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): boolean
}

export interface LeastSquaresOptions {
  /** First damping, in units of the squared column lengths [1]. */
  damping: number
  iterations: number
  /** Relative change of χ², seen and predicted, that counts as none [1]. */
  changeTolerance: number
  /** χ² below which changes count as absolute [1]. */
  changeFloor: number
  /** Relative step that counts as none [1]. */
  stepTolerance: number
  /** So many iterations in a row must meet a tolerance [1]. */
  confirmations: number
}

/** For searches: many fits from good starts (logs of rates, shares). */
export const SEARCH: LeastSquaresOptions = { damping: 0.01, iterations: 150, changeTolerance: 1e-9, changeFloor: 1e-3, stepTolerance: 1e-7, confirmations: 1 }
/** For fits from a start that a person gives, to the last digits. With less damping at first, a far start can run onto a plateau. */
export const CERTIFIED: LeastSquaresOptions = { damping: 100, iterations: 20_000, changeTolerance: 1e-15, changeFloor: 0, stepTolerance: 1e-14, confirmations: 3 }

export interface LeastSquaresFit {
  parameters: Float64Array
  /** Sum of squared residuals [1]. */
  chi2: number
  iterations: number
  converged: boolean
  /** Parameters that stand on a bound. */
  atBound: boolean[]
  /** At the solution. */
  residuals: Float64Array
  /** points × parameters, row by row, at the solution. */
  jacobian: Float64Array
}

const squared = (values: Float64Array) => {
  let sum = 0
  for (let i = 0; i < values.length; i++) sum += values[i]! * values[i]!
  return sum
}

/** What one iteration knows: the triangle of the Jacobian, Qᵀr, the gradient and the scales. */
interface Linear { triangle: Float64Array, right: Float64Array, gradient: Float64Array }

class Search {
  private readonly m: number
  private readonly n: number
  private readonly scales: Float64Array
  x: Float64Array
  residuals: Float64Array
  jacobian: Float64Array
  chi2 = Infinity
  private trial: { x: Float64Array, residuals: Float64Array, jacobian: Float64Array }
  private readonly low: Float64Array
  private readonly high: Float64Array
  /** Reserved once: the Jacobian's triangle with its right side, and the damped system of one step. */
  private readonly linear: Linear
  private readonly matrix: Float64Array
  private readonly right: Float64Array
  private readonly damped: Float64Array
  private readonly rest: Float64Array

  constructor(private readonly problem: LeastSquaresProblem, start: ArrayLike<number>) {
    this.m = problem.points
    this.n = problem.parameters
    const { m, n } = this, rows = Math.max(m, n)
    this.scales = new Float64Array(n)
    this.low = Float64Array.from({ length: n }, (_, j) => problem.lower?.[j] ?? -Infinity)
    this.high = Float64Array.from({ length: n }, (_, j) => problem.upper?.[j] ?? Infinity)
    this.x = new Float64Array(n)
    for (let j = 0; j < n; j++) this.x[j] = this.within(j, start[j]!)
    this.residuals = new Float64Array(m)
    this.jacobian = new Float64Array(m * n)
    this.trial = { x: new Float64Array(n), residuals: new Float64Array(m), jacobian: new Float64Array(m * n) }
    this.matrix = new Float64Array(rows * n)
    this.right = new Float64Array(rows)
    this.linear = { triangle: this.matrix, right: this.right, gradient: new Float64Array(n) }
    this.damped = new Float64Array(2 * n * n)
    this.rest = new Float64Array(2 * n)
  }

  private within(j: number, value: number): number {
    return Math.min(this.high[j]!, Math.max(this.low[j]!, value))
  }

  atBound(j: number): boolean {
    return this.x[j]! <= this.low[j]! || this.x[j]! >= this.high[j]!
  }

  begin(): boolean {
    if (!this.problem.evaluate(this.x, this.residuals, this.jacobian)) return false
    this.chi2 = squared(this.residuals)
    return Number.isFinite(this.chi2)
  }

  linearise(): Linear {
    const { m, n, scales, jacobian, residuals, matrix, right } = this, { gradient } = this.linear
    matrix.fill(0)
    matrix.set(jacobian)
    right.fill(0)
    right.set(residuals)
    for (let j = 0; j < n; j++) {
      let length = 0, slope = 0
      for (let i = 0, at = j; i < m; i++, at += n) {
        const value = jacobian[at]!
        length += value * value
        slope += value * residuals[i]!
      }
      gradient[j] = slope
      scales[j] = Math.max(0.95 * scales[j]!, Math.sqrt(length))
    }
    triangularise(matrix, right, right.length, n)
    return this.linear
  }

  /** The damped step inside the bounds: what would cross a bound is put on it and the others are solved again. */
  step({ triangle, right, gradient }: Linear, damping: number): Float64Array {
    const { n } = this, step = new Float64Array(n), free: number[] = []
    for (let j = 0; j < n; j++) {
      const outward = (this.x[j]! <= this.low[j]! && gradient[j]! >= 0) || (this.x[j]! >= this.high[j]! && gradient[j]! <= 0)
      if (!outward && this.scales[j]! > 0) free.push(j)
    }
    while (free.length > 0) {
      const solved = this.solve(triangle, right, step, free, damping)
      let crossed = false
      for (let k = free.length - 1; k >= 0; k--) {
        const j = free[k]!, wanted = solved[k]!, limit = this.problem.stepLimit?.[j] ?? Infinity
        const low = Math.max(this.low[j]! - this.x[j]!, -limit), high = Math.min(this.high[j]! - this.x[j]!, limit)
        if (wanted >= low && wanted <= high) continue
        step[j] = wanted < low ? low : high
        free.splice(k, 1)
        crossed = true
      }
      if (crossed) continue
      for (let k = 0; k < free.length; k++) step[free[k]!] = solved[k]!
      break
    }
    return step
  }

  /** Least squares of [R; √λ·D]·p = −[Qᵀr; 0] over the free parameters, the others being held at their step. */
  private solve(triangle: Float64Array, right: Float64Array, held: Float64Array, free: number[], damping: number): Float64Array {
    const { n, damped, rest, scales } = this, columns = free.length, root = Math.sqrt(damping), anyHeld = columns < n
    for (let i = 0; i < n; i++) {
      let value = -right[i]!
      if (anyHeld) for (let j = i; j < n; j++) if (held[j] !== 0 && !free.includes(j)) value -= triangle[i * n + j]! * held[j]!
      rest[i] = value
      for (let k = 0; k < columns; k++) damped[i * columns + k] = triangle[i * n + free[k]!]!
    }
    for (let row = 0; row < columns; row++) {
      rest[n + row] = 0
      for (let k = 0; k < columns; k++) damped[(n + row) * columns + k] = row === k ? root * scales[free[k]!]! : 0
    }
    triangularise(damped, rest, n + columns, columns)
    return backSubstitute(damped, rest, columns)
  }

  /** Decrease of χ² that the linear model foresees. */
  predicted({ triangle, right }: Linear, step: Float64Array): number {
    let before = 0, after = 0
    for (let i = 0; i < this.n; i++) {
      let value = right[i]!
      before += value * value
      for (let j = i; j < this.n; j++) value += triangle[i * this.n + j]! * step[j]!
      after += value * value
    }
    return before - after
  }

  /** Scaled length of a step relative to the parameters' own. */
  relativeLength(step: Float64Array): number {
    let moved = 0, stands = 0
    for (let j = 0; j < this.n; j++) {
      moved += (this.scales[j]! * step[j]!) ** 2
      stands += (this.scales[j]! * this.x[j]!) ** 2
    }
    return moved === 0 ? 0 : Math.sqrt(moved / Math.max(stands, 1e-300))
  }

  /** Goes the step where it lowers χ²; returns the decrease, or null where it does not. */
  go(step: Float64Array): number | null {
    const { x, residuals, jacobian } = this.trial
    for (let j = 0; j < x.length; j++) x[j] = this.within(j, this.x[j]! + step[j]!)
    if (!this.problem.evaluate(x, residuals, jacobian)) return null
    const chi2 = squared(residuals)
    if (!Number.isFinite(chi2) || chi2 > this.chi2) return null
    const decrease = this.chi2 - chi2
    this.trial = { x: this.x, residuals: this.residuals, jacobian: this.jacobian }
    this.x = x
    this.residuals = residuals
    this.jacobian = jacobian
    this.chi2 = chi2
    return decrease
  }
}

/**
 * Fits by Levenberg–Marquardt (Marquardt 1963; damping after Nielsen 1999): no normal equations anywhere.
 * @param problem - residuals, derivatives, bounds
 * @param start - first parameters; put inside the bounds [units of the parameters]
 * @param options - SEARCH or CERTIFIED
 * @returns the best point found; `converged` is false where the iterations ended first
 */
export function fitLeastSquares(problem: LeastSquaresProblem, start: ArrayLike<number>, options: LeastSquaresOptions = SEARCH): LeastSquaresFit {
  const search = new Search(problem, start)
  if (!search.begin()) throw new RangeError('The model is not defined at the start.')
  let { damping } = options, growth = 2, met = 0, converged = false, iterations = 0
  let linear = search.linearise()
  while (iterations < options.iterations && !converged) {
    iterations++
    const step = search.step(linear, damping), predicted = search.predicted(linear, step), length = search.relativeLength(step)
    const decrease = search.go(step)
    const least = options.changeTolerance * Math.max(search.chi2, options.changeFloor)
    met = length <= options.stepTolerance || (decrease !== null && decrease <= least && predicted <= least) ? met + 1 : 0
    converged = met >= options.confirmations || search.chi2 === 0
    if (decrease === null) {
      damping *= growth
      growth *= 2
      if (!(damping < 1e300)) break
      continue
    }
    const gain = predicted > 0 ? decrease / predicted : 1
    damping = Math.max(1e-300, damping * Math.max(1 / 5, 1 - (2 * gain - 1) * (2 * gain - 1) * (2 * gain - 1)))
    growth = 2
    linear = search.linearise()
  }
  const { x, chi2, residuals, jacobian } = search
  return { parameters: x, chi2, iterations, converged, atBound: Array.from(x, (_, j) => search.atBound(j)), residuals, jacobian }
}

/**
 * Covariance of the parameters for unit residual variance, by the triangle of the Jacobian; rows and columns of fixed parameters are NaN.
 * @param fit - at its solution
 * @param free - parameters that count as estimated; default those not on a bound
 * @returns parameters × parameters, row by row, or null where the data do not determine them [units squared]
 */
export function covarianceOf(fit: LeastSquaresFit, free: readonly boolean[] = fit.atBound.map(at => !at)): Float64Array | null {
  const n = fit.parameters.length, m = fit.residuals.length
  const kept = Array.from({ length: n }, (_, j) => j).filter(j => free[j]), k = kept.length
  if (k === 0 || m < k) return null
  const matrix = new Float64Array(m * k)
  for (let i = 0; i < m; i++) kept.forEach((j, c) => {
    matrix[i * k + c] = fit.jacobian[i * n + j]!
  })
  triangularise(matrix, new Float64Array(m), m, k)
  const inverse: Float64Array[] = []
  for (let c = 0; c < k; c++) {
    if (!(Math.abs(matrix[c * k + c]!) > 0)) return null
    const unit = new Float64Array(k)
    unit[c] = 1
    inverse.push(backSubstitute(matrix, unit, k))
  }
  const found = new Float64Array(n * n).fill(Number.NaN)
  for (let a = 0; a < k; a++) for (let b = 0; b < k; b++) {
    let sum = 0
    for (let c = 0; c < k; c++) sum += inverse[c]![a]! * inverse[c]![b]!
    found[kept[a]! * n + kept[b]!] = sum
  }
  return found.every((value, i) => !Number.isFinite(value) ? !free[Math.floor(i / n)] || !free[i % n] : true) ? found : null
}
