/** Prepared recordings with the covariance of their cells: measured where cells are given, assumed where only means are. */
import type { ConditionData } from '../../recordings/types'
import { cellCount, cellDirections, cellVariance, whitening, type CellDirections, type CellVariance } from '../cell-covariance'
import type { WeighCondition, WeighData } from './prepare'

/** What cells are assumed to differ by where they are not given: log rates and depletion. */
export const ASSUMED = { kappa: 0.1, delta: 0.025 } as const

export interface CellNoise { variance: CellVariance, directions: CellDirections[] }

const scaled = (one: WeighCondition, sigma: number) => one.n.map(n => sigma / Math.sqrt(n))

/**
 * Noise between and within cells.
 * @param data - prepared from `conditions`, in the same order
 * @param conditions - those that `data` was prepared from
 * @returns σ, κ, δ and the directions, or null where some condition has no cells or they tell too little
 */
export function cellNoise(data: WeighData, conditions: readonly ConditionData[]): CellNoise | null {
  const own = data.conditions.map(one => conditions.find(other => other.condition === one.condition && other.protocol === one.protocol && other.manipulation === one.manipulation)!)
  if (own.some(one => one.cells.length === 0) || data.conditions.some(one => one.timesS.length < 5)) return null
  const directions = data.conditions.map(one => cellDirections(one.timesS, one.ratio, one.error)), variance = cellVariance(own, directions)
  return variance && variance.sigma > 0 ? { variance, directions } : null
}

/**
 * Data whose means are weighted by the covariance of cells.
 * @param data - prepared
 * @param noise - of the cells
 * @param conditions - with the cells themselves
 * @returns data for the same search
 */
export function withCells(data: WeighData, noise: CellNoise, conditions: readonly ConditionData[]): WeighData {
  const { sigma, kappa, delta } = noise.variance
  return {
    ...data, conditions: data.conditions.map((one, c) => {
      const error = scaled(one, sigma), source = conditions.find(other => other.condition === one.condition && other.protocol === one.protocol)!
      return { ...one, error, whiten: whitening(error, noise.directions[c]!, kappa, delta, Math.max(1, cellCount(source, one.timesS))) }
    }),
  }
}

/**
 * Data with an assumed covariance, for the interval of the depletion where only means are given.
 * @param data - prepared, with n
 * @returns data for profiles; null where n is not known or a condition has fewer than five points
 */
export function withAssumedCells(data: WeighData): WeighData | null {
  if (data.noise.kind !== 'pooled' || data.conditions.some(one => one.timesS.length < 5)) return null
  return {
    ...data, conditions: data.conditions.map((one) => {
      const directions = cellDirections(one.timesS, one.ratio, one.error), cells = Math.max(...one.n)
      return { ...one, whiten: whitening(one.error, directions, ASSUMED.kappa, ASSUMED.delta, cells) }
    }),
  }
}
