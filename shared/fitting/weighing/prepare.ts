/** Recordings as a weigh-up reads them: points that count, the error of each, what had to be assumed. */
import type { ConditionData, SummaryPoint } from '../../recordings/types'
import { UNTOUCHED } from '../../recordings/types'
import { pooledSdOf } from '../point-errors'
import { REFERENCE_LAST_S } from './explanations'

export interface WeighCondition {
  condition: string
  protocol: string
  manipulation: string
  /** Rising [s]. */
  timesS: Float64Array
  /** In the scale of the search: the longest interval of all is 51.2. */
  times: Float64Array
  ratio: Float64Array
  /** Standard error of each mean [1]; 1 where the scatter must tell it. */
  error: Float64Array
  /** Means over so many cells; NaN where not known. */
  n: Float64Array
  /** SD between cells [1]; NaN where not known. */
  sd: Float64Array
  /** Inverse Cholesky factor of the covariance of the means, row by row; null: independent points. */
  whiten: Float64Array | null
  /** Points that stay out: set aside, or without a number [count]. */
  aside: number
}

export type NoiseKind = 'pooled' | 'mixed' | 'sem' | 'scatter'
export interface WeighNoise { kind: NoiseKind, pooledSd: number | null, sentence: string }

export interface WeighData {
  conditions: WeighCondition[]
  noise: WeighNoise
  /** Manipulations other than the untouched, in order of appearance. */
  manipulations: string[]
  /** The manipulation that counts as untouched. */
  untouched: string
  protocols: string[]
  /** Seconds in one unit of the search's time. */
  unitS: number
  first: number
  last: number
  points: number
}

const counts = (point: SummaryPoint) => point.aside === null && Number.isFinite(point.ratio) && Number.isFinite(point.intervalMs) && point.intervalMs >= 0
const known = (value: number | null): value is number => value !== null && Number.isFinite(value)

function semOf({ sd, sem, n }: SummaryPoint): number {
  if (known(sem) && sem > 0) return sem
  return known(sd) && sd > 0 && known(n) && n > 0 ? sd / Math.sqrt(n) : NaN
}
const sdOf = ({ sd, sem, n }: SummaryPoint): number => known(sd) ? sd : known(sem) && known(n) ? sem * Math.sqrt(n) : NaN

/** One SD over √n wherever n is known, the point's own SEM where it is not; where neither is, all points weigh alike. */
function errorsOf(points: readonly SummaryPoint[], pooledSd: number | null): { errors: number[], kind: NoiseKind } {
  const pooled = points.map(({ n }) => pooledSd !== null && pooledSd > 0 && known(n) && n > 0 ? pooledSd / Math.sqrt(n) : NaN)
  const errors = points.map((point, i) => Number.isFinite(pooled[i]!) ? pooled[i]! : semOf(point))
  if (points.length === 0 || errors.some(error => !Number.isFinite(error))) return { errors: points.map(() => 1), kind: 'scatter' }
  const byPool = pooled.filter(Number.isFinite).length
  return { errors, kind: byPool === points.length ? 'pooled' : byPool > 0 ? 'mixed' : 'sem' }
}

function noiseSentence(kind: NoiseKind, sd: number | null): string {
  if (kind === 'pooled') return `Every point is weighted by one standard deviation between cells, ${sd!.toFixed(4)}, pooled over all points, over √n.`
  if (kind === 'mixed') return `Points with n are weighted by the pooled standard deviation ${sd!.toFixed(4)} over √n; points without n by their own SEM.`
  if (kind === 'sem') return 'n is not given, so every point is weighted by its own SEM; that makes fits look worse and choices less sure than one pooled standard deviation would.'
  return 'Some points have no error, so all weigh alike and the scatter about the curves tells the error; the criterion is then AICc.'
}

function toCondition(data: ConditionData, points: SummaryPoint[], errors: readonly number[], unitS: number): WeighCondition {
  const timesS = Float64Array.from(points, point => point.intervalMs / 1000)
  return {
    condition: data.condition, protocol: data.protocol, manipulation: data.manipulation, timesS, times: timesS.map(time => time / unitS),
    ratio: Float64Array.from(points, point => point.ratio), error: Float64Array.from(errors), n: Float64Array.from(points, point => point.n ?? NaN), sd: Float64Array.from(points, sdOf),
    whiten: null, aside: data.points.length - points.length,
  }
}

/**
 * Prepares recordings for a weigh-up.
 * @param conditions - weighed together
 * @param pool - conditions over which the SD between cells is pooled: these, or a wider set of the same bench
 * @param pooledSd - the SD itself, where it is known from elsewhere [1]
 * @returns points with errors, protocols and manipulations; conditions without any point are left out
 */
export function prepare(conditions: readonly ConditionData[], pool: readonly ConditionData[] = conditions, pooledSd?: number): WeighData {
  const kept = conditions.map(data => ({ data, points: data.points.filter(counts).sort((a, b) => a.intervalMs - b.intervalMs) })).filter(({ points }) => points.length > 0)
  const all = kept.flatMap(({ points }) => points), sd = pooledSd ?? pooledSdOf(pool), { errors, kind } = errorsOf(all, sd)
  const lastS = Math.max(0, ...all.map(point => point.intervalMs / 1000)), unitS = lastS > 0 ? lastS / REFERENCE_LAST_S : 1
  let from = 0
  const ready = kept.map(({ data, points }) => toCondition(data, points, errors.slice(from, from += points.length), unitS))
  const named = [...new Set(ready.map(one => one.manipulation))], untouched = named.includes(UNTOUCHED) ? UNTOUCHED : named[0] ?? UNTOUCHED
  const times = ready.flatMap(one => [...one.times]).filter(time => time > 0)
  return {
    conditions: ready, noise: { kind, pooledSd: kind === 'pooled' || kind === 'mixed' ? sd : null, sentence: noiseSentence(kind, sd) }, manipulations: named.filter(name => name !== untouched), untouched,
    protocols: [...new Set(ready.map(one => one.protocol))], unitS, first: Math.min(...times), last: Math.max(...times), points: all.length,
  }
}
