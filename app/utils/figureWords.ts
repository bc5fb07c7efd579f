/** What a refill figure says to those who hear it: whole sentences from the same numbers. */
import { decimals, placesFor, setTime } from './figureNumber'
import { curveValueAt, type FigureSeries } from './figureSeries'
import type { FigureDifference } from './figureDifference'
import type { TimeAxis } from './figureAxis'

/** A value of a curve at a time with half its 95 % interval, as `0.442 ± 0.008`; null where the curve does not reach. */
export function readingOf(series: FigureSeries, timeS: number): string | null {
  const value = curveValueAt(series.times, series.values, timeS)
  if (value === null) return null
  if (!series.inner) return decimals(value, 3)
  const low = curveValueAt(series.times, series.inner.low, timeS)
  const high = curveValueAt(series.times, series.inner.high, timeS)
  if (low === null || high === null || !(high > low)) return decimals(value, 3)
  const half = (high - low) / 2
  const places = Math.max(3, placesFor(half) - 1)
  return `${decimals(value, places)} ± ${decimals(half, places)}`
}

/** The largest gap between two curves as a phrase, e.g. `−4.2 ± 0.8 at 0.9 s`. */
export function gapWords(difference: FigureDifference): string | null {
  if (!difference.largest) return null
  const { value, halfWidth, timeS } = difference.largest
  const error = halfWidth !== null && halfWidth > 0 ? ` ± ${decimals(halfWidth, 1)}` : ''
  return `${decimals(value, 1)}${error} at ${setTime(timeS)}`
}

/** The text alternative: axes, three readings of every curve, the largest gap. */
export function figureSentences(
  yTitle: string, axis: Pick<TimeAxis, 'kind' | 'fromS' | 'toS'>, series: readonly FigureSeries[], difference: FigureDifference | null, names: [string, string] | null,
): string {
  const { kind: scale, fromS, toS } = axis
  const frame = `${yTitle} against time on a ${scale === 'log' ? 'logarithmic' : 'linear'} axis, ${setTime(fromS)} to ${setTime(toS)}.`
  const curves = series.map((one) => {
    const middle = one.kind === 'recording' ? null : scale === 'log' ? Math.sqrt(fromS * toS) : (fromS + toS) / 2
    const times = [...new Set([one.times[0], middle, one.times.at(-1)])].filter((time): time is number => typeof time === 'number')
    const readings = times.map(time => ({ time, reading: readingOf(one, time) })).filter(({ reading }) => reading !== null)
    return `${one.label}: ${readings.map(({ time, reading }) => `${reading} at ${setTime(time)}`).join(', ')}.`
  })
  const gap = difference && names ? gapWords(difference) : null
  const gapSentence = gap ? ` Largest gap, ${names![0]} minus ${names![1]}: ${gap} in percentage points.` : ''
  return `${frame} ${curves.join(' ')}${gapSentence}`.replaceAll('\u00A0', ' ')
}
