/** Points of a condition as a fit reads them: which count, how far each may be trusted, and what had to be assumed. */
import type { ConditionData, SummaryPoint } from '../recordings/types'
import { cellWeights, type CellWeights } from './cell-weights'
import { refusal, type FitNote, type FitRefusal } from './refusals'

export { refusal, type FitNote, type FitRefusal } from './refusals'

export const WEIGHTS = ['sem', 'pooled', 'none', 'cells'] as const
/**
 * By each point's own SEM; by one SD pooled over the points, over √n of each; or all alike, the scatter telling the error;
 * or by the covariance of the cells behind the means, where cells are given: the cell is then a random effect.
 */
export type Weights = typeof WEIGHTS[number]

export interface FitPoint {
  timeS: number
  ratio: number
  /** Standard error that the point is weighted with [1]; 1 where all weigh alike. */
  error: number
}

export interface ErrorOptions {
  weights: Weights
  /** Least SEM that a point is weighted with [1]; a SEM of 0 needs one. */
  semFloor?: number
  /** SD to use instead of the one pooled over these conditions, from a wider set of them [1]. */
  pooledSd?: number
}

export interface WeightedPoints {
  /** As used: `none` where errors were asked for and are missing. */
  weights: Weights
  /** One list per condition, sorted by interval. */
  points: FitPoint[][]
  /** SD between cells pooled over all points [1]; null where it was not used. */
  pooledSd: number | null
  /** Whitening factor of each condition's means and what it was made of; null where points are taken as independent. */
  cells: CellWeights | null
  notes: FitNote[]
}

const countingPoints = (condition: ConditionData): SummaryPoint[] =>
  condition.points.filter(point => point.aside === null && Number.isFinite(point.ratio)).sort((a, b) => a.intervalMs - b.intervalMs)

const sdOf = ({ sd, sem, n }: SummaryPoint): number | null => sd ?? (sem !== null && n !== null ? sem * Math.sqrt(n) : null)
const semOf = ({ sd, sem, n }: SummaryPoint): number | null => sem ?? (sd !== null && n !== null ? sd / Math.sqrt(n) : null)

/**
 * SD between cells, pooled over points: √(Σ(n − 1)·SD² / Σ(n − 1)).
 * @param conditions - whose points have SD or SEM, and n
 * @returns the SD; null where no point has an error and n of 2 or more [1]
 */
export function pooledSdOf(conditions: readonly ConditionData[]): number | null {
  let squares = 0, degrees = 0
  for (const point of conditions.flatMap(countingPoints)) {
    const sd = sdOf(point), n = point.n
    if (sd === null || n === null || n < 2) continue
    squares += (n - 1) * sd * sd
    degrees += n - 1
  }
  return degrees > 0 ? Math.sqrt(squares / degrees) : null
}

const toPoint = ({ intervalMs, ratio }: SummaryPoint, error: number): FitPoint => ({ timeS: intervalMs / 1000, ratio, error })

function pooled(lists: SummaryPoint[][], sd: number | null): WeightedPoints | FitRefusal {
  const unknown = lists.flat().filter(({ n }) => n === null).length
  if (unknown > 0) return refusal('n-missing', `Pooled weights divide one SD by √n, and ${unknown} of ${lists.flat().length} points have no n. Give n, or weigh by SEM or not at all.`)
  if (sd === null) return refusal('sd-missing', 'Pooled weights need SD or SEM of points with n of 2 or more, and there is none. Weigh by SEM or not at all.')
  if (sd === 0) return refusal('zero-error', 'The pooled SD is 0; no weight can be made of it. Fit without weights.')
  return { weights: 'pooled', points: lists.map(list => list.map(point => toPoint(point, sd / Math.sqrt(point.n!)))), pooledSd: sd, cells: null, notes: [] }
}

function byCells(conditions: readonly ConditionData[], lists: SummaryPoint[][]): WeightedPoints | FitRefusal {
  const cells = cellWeights(conditions, lists.map(list => list.map(({ intervalMs, ratio, n }) => ({ timeS: intervalMs / 1000, ratio, n }))))
  return 'refused' in cells ? cells : { weights: 'cells', points: lists.map((list, c) => list.map((point, i) => toPoint(point, cells.errors[c]![i]!))), pooledSd: null, cells, notes: [] }
}

const unweighted = (lists: SummaryPoint[][], notes: FitNote[] = []): WeightedPoints => ({ weights: 'none', points: lists.map(list => list.map(point => toPoint(point, 1))), pooledSd: null, cells: null, notes })

/**
 * Points that count, with the error that each is weighted by.
 * @param conditions - fitted together: `pooled` pools over all of them
 * @param options - weights, floor, pooled SD
 * @returns points per condition, or why there are none to fit
 */
export function weightedPoints(conditions: readonly ConditionData[], { weights, semFloor = 0, pooledSd }: ErrorOptions): WeightedPoints | FitRefusal {
  const lists = conditions.map(countingPoints), all = lists.flat()
  if (weights === 'none') return unweighted(lists)
  if (weights === 'cells') return byCells(conditions, lists)
  if (weights === 'pooled') return pooled(lists, pooledSd ?? pooledSdOf(conditions))
  const missing = all.filter(point => semOf(point) === null).length
  if (missing > 0) return unweighted(lists, [{ code: 'errors-missing', message: `${missing} of ${all.length} points have no SEM, so all points weigh alike and the scatter about the curve stands for the error.` }])
  const errors = (point: SummaryPoint) => Math.max(semFloor, semOf(point)!)
  const zero = all.find(point => !(errors(point) > 0))
  if (zero) return refusal('zero-error', `The SEM at ${zero.intervalMs} ms is 0, which would give this point all the weight. Give a floor for the SEM, pool the SD over points, or set the point aside.`)
  const raised = all.filter(point => semOf(point)! < semFloor).length
  const notes = raised > 0 ? [{ code: 'sem-floor', message: `${raised} of ${all.length} points have a SEM below ${semFloor} and are weighted with ${semFloor}.` }] : []
  return { weights, points: lists.map(list => list.map(point => toPoint(point, errors(point)))), pooledSd: null, cells: null, notes }
}
