/** Several curves of one or two exponentials as one least-squares problem, with shared, free and held parameters. */
import type { LeastSquaresProblem } from './least-squares'
import type { FitPoint } from './point-errors'
import { PLACE, PLACES, recoveryAt, type ParameterName } from './recovery-model'

/** A free parameter: what it is, which curves it belongs to, between which bounds (logarithms for time constants). */
export interface Slot {
  name: ParameterName
  place: number
  /** Protocol, manipulation or condition that it belongs to; null where all curves share it. */
  group: string | null
  lower: number
  upper: number
  curves: number[]
}

export interface Curve {
  timesS: Float64Array
  ratios: Float64Array
  /** 1 / error of each point [1]. */
  weights: Float64Array
  /** Slot of each place, −1 where it is held. One slot may stand at two places. */
  slots: Int16Array
  /** Values of held places. */
  held: Float64Array
  /** Inverse Cholesky factor of the covariance of weighted residuals, row by row; null where they are independent. */
  whitening: Float64Array | null
}

/** Time constants are fitted as logarithms. */
export const isLogarithmic = ({ place }: Slot): boolean => place === PLACE.logTauFast || place === PLACE.logTauSlow

/**
 * A curve from its points.
 * @param points - sorted by interval
 * @param slots - slot of each of the five places, −1 where it is held [1]
 * @param held - value of each place [1, ln s]
 * @returns the curve, its points independent
 */
export function curveOf(points: readonly FitPoint[], slots: readonly number[], held: readonly number[]): Curve {
  return {
    timesS: Float64Array.from(points, point => point.timeS), ratios: Float64Array.from(points, point => point.ratio),
    weights: Float64Array.from(points, point => 1 / point.error), slots: Int16Array.from(slots), held: Float64Array.from(held), whitening: null,
  }
}

/**
 * The five values that a curve is made of.
 * @param curve - slots and held values
 * @param x - free parameters [1, ln s]
 * @param at - takes plateau, depletion, share [1] and the logarithms of τ in s
 */
export function placesOf(curve: Curve, x: ArrayLike<number>, at: Float64Array): void {
  for (let place = 0; place < PLACES; place++) {
    const slot = curve.slots[place]!
    at[place] = slot < 0 ? curve.held[place]! : x[slot]!
  }
}

/** rows ← factor·rows for a lower triangle, from the last row up, so that it can be done in place. */
function whiten(factor: Float64Array, rows: Float64Array, first: number, count: number, width: number): void {
  for (let i = count - 1; i >= 0; i--) for (let c = 0; c < width; c++) {
    let sum = 0
    for (let k = 0; k <= i; k++) sum += factor[i * count + k]! * rows[(first + k) * width + c]!
    rows[(first + i) * width + c] = sum
  }
}

/**
 * Weighted residuals (curve minus ratio, over the error) of all curves and their derivatives.
 * @param curves - their ratios may be changed between fits; the buffers are made once
 * @param slots - free parameters
 * @returns the problem
 */
export function curveProblem(curves: readonly Curve[], slots: readonly Slot[]): LeastSquaresProblem {
  const at = new Float64Array(PLACES), by = new Float64Array(PLACES), width = slots.length
  function evaluate(x: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): boolean {
    let row = 0
    jacobian?.fill(0)
    for (const curve of curves) {
      placesOf(curve, x, at)
      const { timesS, ratios, weights, whitening } = curve, first = row
      for (let i = 0; i < timesS.length; i++, row++) {
        const weight = weights[i]!
        residuals[row] = weight * (recoveryAt(at, timesS[i]!, jacobian ? by : null) - ratios[i]!)
        if (!jacobian) continue
        for (let place = 0; place < PLACES; place++) {
          const slot = curve.slots[place]!
          if (slot >= 0) jacobian[row * width + slot]! += weight * by[place]!
        }
      }
      if (!whitening) continue
      whiten(whitening, residuals, first, timesS.length, 1)
      if (jacobian) whiten(whitening, jacobian, first, timesS.length, width)
    }
    return true
  }
  return {
    points: curves.reduce((sum, { timesS }) => sum + timesS.length, 0), parameters: width, evaluate,
    lower: slots.map(slot => slot.lower), upper: slots.map(slot => slot.upper), stepLimit: slots.map(slot => isLogarithmic(slot) ? 3 : Infinity),
  }
}
