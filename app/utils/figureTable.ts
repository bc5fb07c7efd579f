/** The numbers behind a refill figure: a short table to read, and all samples as CSV with units in the head. */
import { curveValueAt, type FigureSeries } from './figureSeries'
import { readingOf } from './figureWords'

export interface FigureTable { head: { name: string, unit: string }[], rows: string[][], samples: number }

/** At most this many rows are read on a page; the CSV has all. */
const TABLE_ROWS = 24

/** Every time at which some curve has a sample, once, rising [s]. */
export function allTimes(series: readonly FigureSeries[]): number[] {
  return [...new Set(series.flatMap(one => one.times))].sort((a, b) => a - b)
}

/** Times spread evenly over a log axis, taken from the samples themselves. */
function chosenTimes(times: number[]): number[] {
  if (times.length <= TABLE_ROWS) return times
  const positive = times.filter(time => time > 0)
  const first = positive[0]!
  const span = Math.log(positive.at(-1)! / first)
  const wanted = Array.from({ length: TABLE_ROWS - 1 }, (_, i) => first * Math.exp(span * i / (TABLE_ROWS - 2)))
  const near = wanted.map(want => positive.reduce((best, time) => Math.abs(time - want) < Math.abs(best - want) ? time : best, first))
  return [...new Set([...(times[0] === 0 ? [0] : []), ...near])]
}

export function figureTable(series: readonly FigureSeries[]): FigureTable {
  const times = allTimes(series)
  const head = [{ name: 'Time', unit: 's' }, ...series.map(one => ({ name: one.label, unit: one.inner ? 'fraction, ± 95 %' : one.errors ? 'fraction, SEM' : 'fraction' }))]
  const rows = chosenTimes(times).map(timeS => [
    String(Number(timeS.toPrecision(4))),
    ...series.map((one) => {
      if (!one.errors) return readingOf(one, timeS) ?? '–'
      const i = one.times.indexOf(timeS)
      if (i < 0) return '–'
      const error = one.errors[i]
      return error === null || error === undefined ? one.values[i]!.toFixed(3) : `${one.values[i]!.toFixed(3)} ± ${error.toFixed(3)}`
    }),
  ])
  return { head, rows, samples: times.length }
}

const quoted = (text: string) => /[",\n\r]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text
/** A cell that a spreadsheet would read as a formula is kept a text. */
const safe = (text: string) => quoted(/^[=+@\t]|^-(?!\d)/.test(text) ? `'${text}` : text)
/** Rows as CSV (RFC 4180: comma, quotes doubled, CRLF), decimal point. */
export function csvOf(rows: readonly (readonly (string | number | null)[])[]): string {
  return rows.map(row => row.map(cell => cell === null ? '' : typeof cell === 'number' ? String(cell) : safe(cell)).join(',')).join('\r\n') + '\r\n'
}

/** All samples of all curves, one row a time. */
export function figureCsv(series: readonly FigureSeries[]): string {
  const head = ['time_s', ...series.flatMap(one => [
    `${one.label} (fraction)`,
    ...(one.inner ? [`${one.label}, 95 % of the mean, low`, `${one.label}, 95 % of the mean, high`] : []),
    ...(one.outer ? [`${one.label}, 95 % of single ribbons, low`, `${one.label}, 95 % of single ribbons, high`] : []),
    ...(one.errors ? [`${one.label}, standard error`] : []),
  ])]
  const rows = allTimes(series).map((timeS) => {
    const at = (values: readonly number[] | undefined, one: FigureSeries) => values ? [one.errors ? values[one.times.indexOf(timeS)] ?? null : curveValueAt(one.times, values, timeS)] : []
    return [timeS, ...series.flatMap(one => [
      ...at(one.values, one), ...at(one.inner?.low, one), ...at(one.inner?.high, one), ...at(one.outer?.low, one), ...at(one.outer?.high, one),
      ...(one.errors ? [one.errors[one.times.indexOf(timeS)] ?? null] : []),
    ])]
  })
  return csvOf([head, ...rows])
}
