/** What a refill figure draws: named curves with their bands, and how one is read between its samples. */

export type FigureSeriesKind = 'walk' | 'closed-form' | 'preview' | 'recording' | 'earlier' | 'other'
export interface FigureBand { low: readonly number[], high: readonly number[] }
export interface FigureSeries {
  id: string
  kind: FigureSeriesKind
  /** Stands beside the curve in 600. */
  label: string
  /** The same where a figure is narrow. */
  shortLabel?: string
  /** What the band is, in the second voice below the label. */
  note?: string
  /** [s], rising; a first 0 is the moment of the stimulus. */
  times: readonly number[]
  /** Filled fraction of the sites [1]. */
  values: readonly number[]
  /** 95 % interval of the mean. */
  inner?: FigureBand
  /** 95 % of single ribbons; `outerLabel` names it in the figure. */
  outer?: FigureBand
  outerLabel?: string
  /** Standard errors of measured points (kind `recording`) [1]. */
  errors?: readonly (number | null)[]
}

/** Drawing class of each curve. A preview is drawn like the walk while no walk stands beside it; others follow in dashes. */
export function curveClasses(series: readonly FigureSeries[]): Record<string, string> {
  const hasWalk = series.some(one => one.kind === 'walk')
  const dashes = ['third', 'fourth', 'fifth']
  let others = 0
  return Object.fromEntries(series.map((one) => {
    if (one.kind === 'walk') return [one.id, 'sim']
    if (one.kind === 'preview') return [one.id, hasWalk ? 'third' : 'sim']
    if (one.kind === 'closed-form') return [one.id, 'exp']
    if (one.kind === 'earlier') return [one.id, 'earlier']
    if (one.kind === 'recording') return [one.id, 'dot']
    return [one.id, dashes[others++ % dashes.length]!]
  }))
}

/** Index of the last time ≤ t, or −1. */
export function indexBefore(times: readonly number[], timeS: number): number {
  let low = -1
  let high = times.length
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (times[middle]! <= timeS) low = middle
    else high = middle
  }
  return low
}

/** Straight line between the two samples around a time [s]; null outside the samples. */
export function curveValueAt(times: readonly number[], values: readonly number[], timeS: number): number | null {
  const before = indexBefore(times, timeS)
  if (before < 0) return null
  const first = times[before]!
  if (first === timeS) return values[before] ?? null
  if (before + 1 >= times.length) return null
  const next = times[before + 1]!
  const share = (timeS - first) / (next - first)
  return values[before]! * (1 - share) + values[before + 1]! * share
}

export interface CurvePoint { timeS: number, value: number, index: number }
/**
 * Points worth drawing between two times: the ends read between samples, and at most one sample per half pixel (or `stepPx`),
 * because a curve of 20,000 samples on a log axis crowds its last tenth into a few pixels.
 */
export function drawnPoints(
  times: readonly number[], values: readonly number[], fromS: number, toS: number, place: (timeS: number) => number, stepPx = 0.5,
): CurvePoint[] {
  const points: CurvePoint[] = []
  const add = (timeS: number, value: number | null, index: number) => {
    if (value !== null && Number.isFinite(value)) points.push({ timeS, value, index })
  }
  add(fromS, curveValueAt(times, values, fromS), -1)
  let last = place(fromS)
  for (let i = Math.max(0, indexBefore(times, fromS)); i < times.length; i++) {
    const timeS = times[i]!
    if (timeS <= fromS) continue
    if (timeS >= toS) break
    const x = place(timeS)
    if (x - last < stepPx) continue
    add(timeS, values[i] ?? null, i)
    last = x
  }
  add(toS, curveValueAt(times, values, toS) ?? (times.at(-1) === toS ? values.at(-1) ?? null : null), -1)
  return points
}
