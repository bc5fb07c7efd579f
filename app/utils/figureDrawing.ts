/** Lays a refill figure out in pixels for a given width: frame, axes, paths, labels. Pure; the component only sets it. */
import { area, line } from 'd3-shape'
import { differenceAxis, fractionAxis, timeAxis, type TimeAxis, type TimeScale, type ValueAxis } from './figureAxis'
import { differenceOf, type FigureDifference } from './figureDifference'
import { placeLabels, textWidth, type Box, type LabelTarget, type PlacedLabel } from './figureLabels'
import { curveClasses, drawnPoints, type CurvePoint, type FigureBand, type FigureSeries } from './figureSeries'
import { gapWords } from './figureWords'

export interface FigureOptions {
  width: number
  scale: TimeScale
  series: readonly FigureSeries[]
  /** Ids of the curves whose difference the strip shows. */
  difference?: { of: string, minus: string, title?: string } | null
  /** Height of the frame [px]; by default for the width. */
  frameHeight?: number
}
export interface DrawnPath { key: string, className: string, d: string }
export interface DrawnPoint { key: string, x: number, y: number, error: string | null }
export interface DifferenceLayout { axis: ValueAxis, frame: Box, band: string | null, path: string, title: string, gap: { x: number, y: number, anchor: 'start' | 'end', text: string } | null, difference: FigureDifference }
export interface FigureLayout {
  width: number
  height: number
  narrow: boolean
  frame: Box
  time: TimeAxis
  values: ValueAxis
  bands: DrawnPath[]
  curves: DrawnPath[]
  points: DrawnPoint[]
  labels: PlacedLabel[]
  /** Leaders end in a dot only where no measured point is drawn: it would read as one. */
  leadersPlain: boolean
  strip: DifferenceLayout | null
  /** Foot of the lowest frame, where the time axis has its numbers. */
  footY: number
}

const LEFT = 46
const RIGHT = 18
const TOP = 34
const bound = (series: readonly FigureSeries[]) => {
  const positive = series.flatMap(one => one.times.filter(time => time > 0).slice(0, 1))
  const last = Math.max(...series.flatMap(one => one.times.slice(-1)), 0)
  return { firstS: positive.length ? Math.min(...positive) : 1, lastS: last > 0 ? last : 1 }
}
const highest = (series: readonly FigureSeries[]) => {
  let top = 0
  for (const one of series) for (const values of [one.values, one.outer?.high, one.inner?.high]) for (const value of values ?? []) if (value > top) top = value
  return top
}

type Place = (value: number) => number
const path = (points: CurvePoint[], x: Place, y: Place) => line<CurvePoint>(point => x(point.timeS), point => y(point.value)).digits(1)(points) ?? ''
function bandPath(times: readonly number[], band: FigureBand, axis: TimeAxis, x: Place, y: Place): string {
  const low = drawnPoints(times, band.low, axis.fromS, axis.toS, x)
  const high = drawnPoints(times, band.high, axis.fromS, axis.toS, x)
  const count = Math.min(low.length, high.length)
  return area<number>(i => x(low[i]!.timeS), i => y(low[i]!.value), i => y(high[i]!.value)).digits(1)(Array.from({ length: count }, (_, i) => i)) ?? ''
}

/** Names are placed against curves read at this spacing: finer changes no place. */
const LABEL_STEP_PX = 3

function labelTargets(series: readonly FigureSeries[], axis: TimeAxis, y: Place, narrow: boolean): LabelTarget[] {
  const pixels = (times: readonly number[], values: readonly number[]) =>
    drawnPoints(times, values, axis.fromS, axis.toS, axis.place, LABEL_STEP_PX).map(point => [axis.place(point.timeS), y(point.value)] as const)
  const named = series.map(one => ({
    id: one.id,
    lines: [{ text: narrow ? one.shortLabel ?? one.label : one.label, strong: one.kind !== 'earlier' }, ...(one.note && !narrow ? [{ text: one.note, strong: false }] : [])],
    points: pixels(one.times, one.values),
  }))
  const spreads = narrow
    ? []
    : series.filter(one => one.outer && one.outerLabel).map(one => ({
        id: `${one.id}-outer`, lines: [{ text: one.outerLabel!, strong: false }], edge: true, points: pixels(one.times, one.outer!.low),
      }))
  return [...named, ...spreads]
}

function strip(options: FigureOptions, axis: TimeAxis, frame: Box): DifferenceLayout | null {
  const first = options.series.find(one => one.id === options.difference?.of)
  const second = options.series.find(one => one.id === options.difference?.minus)
  if (!first || !second) return null
  const difference = differenceOf(first, second)
  if (difference.times.length < 2) return null
  const visible = difference.times.map((time, i) => ({ time, i })).filter(({ time }) => time >= axis.fromS)
  const low = Math.min(...visible.map(({ i }) => difference.low?.[i] ?? difference.values[i]!))
  const high = Math.max(...visible.map(({ i }) => difference.high?.[i] ?? difference.values[i]!))
  const values = differenceAxis(low, high, frame.top, frame.bottom)
  const points = drawnPoints(difference.times, difference.values, axis.fromS, axis.toS, axis.place)
  const text = gapWords(difference)
  return {
    axis: values, frame, difference, title: options.difference?.title ?? `${first.label.split(',')[0]} − ${second.label.split(',')[0]!.toLowerCase()} (percentage points)`,
    band: difference.low && difference.high ? bandPath(difference.times, { low: difference.low, high: difference.high }, axis, axis.place, values.place) : null,
    path: path(points, axis.place, values.place),
    gap: text && difference.largest && axis.place(axis.toS) > 500 ? gapPlace(`Largest gap ${text}`, difference.largest.timeS, difference.largest.value, axis, frame) : null,
  }
}

/** Beside the point of the largest gap, at the far edge of the strip, inside the frame. */
function gapPlace(text: string, timeS: number, value: number, axis: TimeAxis, frame: Box) {
  const x = axis.place(Math.max(timeS, axis.fromS))
  const wide = textWidth(text) + 8
  const y = value < 0 ? frame.bottom - 8 : frame.top + 16
  if (x + 40 + wide < frame.right) return { x: x + 40, y, anchor: 'start' as const, text }
  return { x: Math.max(x - 30, frame.left + wide), y, anchor: 'end' as const, text }
}

/** The time axis alone, for sentences and read-outs. */
export function figureTimeAxis(series: readonly FigureSeries[], scale: TimeScale): TimeAxis {
  const { firstS, lastS } = bound(series)
  return timeAxis(scale, firstS, lastS, LEFT, 842)
}

/** Everything that is drawn, in pixels. */
export function layFigure(options: FigureOptions): FigureLayout {
  const { series } = options
  const width = Math.max(240, Math.round(options.width))
  const narrow = width < 560
  const hasStrip = Boolean(options.difference && series.some(one => one.id === options.difference!.of) && series.some(one => one.id === options.difference!.minus))
  const frameHeight = options.frameHeight ?? (narrow ? 242 : Math.round(Math.min(318, Math.max(242, width * 0.37))))
  const frame: Box = { left: LEFT, right: width - (narrow ? 14 : RIGHT), top: TOP, bottom: TOP + frameHeight }
  const { firstS, lastS } = bound(series)
  const time = timeAxis(options.scale, firstS, lastS, frame.left, frame.right)
  const values = fractionAxis(highest(series), frame.top, frame.bottom)
  const classes = curveClasses(series)
  const lines = series.filter(one => one.kind !== 'recording')
  const recordings = series.filter(one => one.kind === 'recording')
  const bands = lines.flatMap(one => [
    ...(one.outer ? [{ key: `${one.id}-outer`, className: 'sim-spread', d: bandPath(one.times, one.outer, time, time.place, values.place) }] : []),
    ...(one.inner ? [{ key: `${one.id}-inner`, className: 'sim-band', d: bandPath(one.times, one.inner, time, time.place, values.place) }] : []),
  ])
  const order = (one: FigureSeries) => one.kind === 'walk' ? 2 : one.kind === 'closed-form' ? 1 : 0
  const curves = [...lines].sort((a, b) => order(a) - order(b)).map(one => ({
    key: one.id, className: classes[one.id]!, d: path(drawnPoints(one.times, one.values, time.fromS, time.toS, time.place), time.place, values.place),
  }))
  const points = recordings.flatMap(one => one.times.flatMap((timeS, i) => timeS < time.fromS || timeS > time.toS ? [] : [pointOf(one, i, time, values)]))
  const stripTop = frame.bottom + 40
  const stripFrame = { ...frame, top: stripTop, bottom: stripTop + (narrow ? 70 : 84) }
  const drawnStrip = hasStrip ? strip(options, time, stripFrame) : null
  const footY = drawnStrip ? stripFrame.bottom : frame.bottom
  const labels = placeLabels(labelTargets(series, time, values.place, narrow), { left: frame.left + 6, right: frame.right - 6, top: frame.top + 26, bottom: frame.bottom - 6 })
  return { width, height: footY + 44, narrow, frame, time, values, bands, curves, points, labels, leadersPlain: recordings.length > 0, strip: drawnStrip, footY }
}

function pointOf(one: FigureSeries, i: number, time: TimeAxis, values: ValueAxis): DrawnPoint {
  const x = time.place(one.times[i]!)
  const value = one.values[i]!
  const error = one.errors?.[i]
  const bar = error ? `M${x.toFixed(1)} ${values.place(value - error).toFixed(1)}V${values.place(value + error).toFixed(1)}` : null
  return { key: `${one.id}-${i}`, x, y: values.place(value), error: bar }
}
