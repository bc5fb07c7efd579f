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

/** At the samples of the first curve that the second reaches. The second carries no error of its own when it is a formula. */
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
    if (first.inner) {
      low.push((first.inner.low[i]! - other) * 100)
      high.push((first.inner.high[i]! - other) * 100)
    }
    if (!largest || Math.abs(value) > Math.abs(largest.value))
      largest = { timeS, value, halfWidth: first.inner ? (first.inner.high[i]! - first.inner.low[i]!) * 50 : null }
  })
  return { times, values, low: first.inner ? low : null, high: first.inner ? high : null, largest }
}
