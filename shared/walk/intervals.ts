/** Intervals by resampling whole replicates: the sites of one ribbon share their neighbourhood and are not independent. */
import { normalBelow, studentQuantile975 } from './normal'
import { Stream, stateOf } from './streams'

export const RESAMPLES = 999
/** More replicates than this are resampled in so many groups of consecutive ones: same law to a part in a thousand, and fast enough to redraw while a run grows. */
export const MOST_GROUPS = 1000
/** Number of the stream that resampling draws from; replicates are numbered below 10⁶, so no walk shares it. */
const RESAMPLING_STREAM = 0xFFFFFFFF

export interface Bounds { low: number | null, high: number | null }

/** Sums of `width` columns over groups of consecutive replicates; `read(replicate, column)`. */
function groupSums(replicates: number, width: number, read: (replicate: number, column: number) => number): { groups: number, sums: Float64Array } {
  const groups = Math.min(replicates, MOST_GROUPS)
  const sums = new Float64Array(groups * width)
  for (let replicate = 0; replicate < replicates; replicate++) {
    const base = Math.floor(replicate * groups / replicates) * width
    for (let column = 0; column < width; column++) sums[base + column]! += read(replicate, column)
  }
  return { groups, sums }
}

/**
 * Share of resamples to cut off below. The plain percentile interval is too narrow for few replicates; it is widened so that its nominal
 * coverage holds for a mean (expanded percentile: Hesterberg 2015, The American Statistician 69:371).
 */
function tailShare(groups: number): number {
  return normalBelow(-Math.sqrt(groups / (groups - 1)) * studentQuantile975(groups - 1))
}

function quantile(sorted: Float64Array, share: number): number | null {
  const place = Math.min(Math.max(share * (sorted.length + 1) - 1, 0), sorted.length - 1)
  const below = sorted[Math.floor(place)]!, above = sorted[Math.ceil(place)]!
  const value = below === above ? below : below + (place - Math.floor(place)) * (above - below)
  return Number.isFinite(value) ? value : null
}

export interface Resampling {
  replicates: number
  /** Columns that are summed over replicates. */
  width: number
  read: (replicate: number, column: number) => number
  /** Statistics of column sums; NaN or Infinity where one is not defined. */
  statistics: (sums: Float64Array, out: Float64Array) => void
  /** How many statistics there are. */
  count: number
  /** Words of the run's own seed, so that every machine draws the same resamples. */
  seedLow: number
  seedHigh: number
}

/**
 * 95 % bootstrap intervals (Efron & Tibshirani 1993) of several statistics at once, from 999 resamples of whole replicates.
 * @param resampling - what is summed and which statistics are made of the sums, in units of the caller
 * @returns one pair of bounds per statistic, in the statistic's own unit; null for a single replicate, or where a bound is not finite
 */
export function resampledIntervals({ replicates, width, read, statistics, count, seedLow, seedHigh }: Resampling): Bounds[] {
  if (replicates < 2) return Array.from({ length: count }, () => ({ low: null, high: null }))
  const { groups, sums } = groupSums(replicates, width, read)
  const stream = new Stream(stateOf(seedLow, seedHigh, RESAMPLING_STREAM))
  const drawn = Array.from({ length: count }, () => new Float64Array(RESAMPLES))
  const total = new Float64Array(width), out = new Float64Array(count)
  for (let resample = 0; resample < RESAMPLES; resample++) {
    total.fill(0)
    for (let i = 0; i < groups; i++) {
      const base = stream.below(groups) * width
      for (let column = 0; column < width; column++) total[column]! += sums[base + column]!
    }
    statistics(total, out)
    for (let k = 0; k < count; k++) drawn[k]![resample] = out[k]!
  }
  const tail = tailShare(groups)
  return drawn.map((values) => {
    values.sort() // NaN goes last: an undefined statistic leaves the upper bound open
    return { low: quantile(values, tail), high: quantile(values, 1 - tail) }
  })
}

/**
 * Half width of the 95 % interval of a mean over replicates.
 * @param variance - variance between replicates [unit²]
 * @param replicates - how many [1]
 * @returns half width, null for a single replicate [unit]
 */
export function meanHalfWidth(variance: number, replicates: number): number | null {
  return replicates < 2 ? null : studentQuantile975(replicates - 1) * Math.sqrt(variance / replicates)
}
