/** Curve minus curve, with the band of the first: what the strip below a refill figure shows. */
import { curveValueAt, type FigureSeries } from './figureSeries'

export interface FigureDifference {
  times: number[]
  /** First minus second [percentage points]. */
  values: number[]
  low: number[] | null
  high: number[] | null
  largest: { timeS: number, value: number, halfWidth: number | null } | null
}

/** Half of a curve's interval at a time; 0 for a formula, which has none. */
function halfAt(series: FigureSeries, timeS: number): number {
  if (!series.inner) return 0
  const low = curveValueAt(series.times, series.inner.low, timeS)
  const high = curveValueAt(series.times, series.inner.high, timeS)
  return low === null || high === null ? 0 : (high - low) / 2
}

/** At the samples of the first curve that the second reaches. Half widths of two independent walks add as squares. */
export function differenceOf(first: FigureSeries, second: FigureSeries): FigureDifference {
  const times: number[] = []
  const values: number[] = []
  const low: number[] = []
  const high: number[] = []
  let largest: FigureDifference['largest'] = null
  first.times.forEach((timeS, i) => {
    const other = curveValueAt(second.times, second.values, timeS)
    const own = first.values[i]
    if (other === null || own === undefined) return
    const value = (own - other) * 100
    times.push(timeS)
    values.push(value)
    const half = second.inner ? Math.hypot(halfAt(first, timeS), halfAt(second, timeS)) * 100 : null
    if (first.inner) {
      low.push(half === null ? (first.inner.low[i]! - other) * 100 : value - half)
      high.push(half === null ? (first.inner.high[i]! - other) * 100 : value + half)
    }
    if (!largest || Math.abs(value) > Math.abs(largest.value))
      largest = { timeS, value, halfWidth: first.inner ? half ?? (first.inner.high[i]! - first.inner.low[i]!) * 50 : null }
  })
  return { times, values, low: first.inner ? low : null, high: first.inner ? high : null, largest }
}
