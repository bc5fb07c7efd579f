/** Axes of a refill figure: where they begin and end, where ticks and their numbers stand. */
import { scaleLinear, scaleLog } from 'd3-scale'

export type TimeScale = 'log' | 'linear'
export interface AxisTick { at: number, text: string | null, major: boolean }
export interface TimeAxis {
  kind: TimeScale
  fromS: number
  toS: number
  place: (timeS: number) => number
  invert: (x: number) => number
  ticks: AxisTick[]
}

/** Numbers of an axis are set short: 0.03, 1, 10, 1000. */
const short = (value: number) => String(Number(value.toPrecision(6)))

/** The largest of 1, 2, 3, 5 × 10^k at or below a time [s]. */
export function roundDown(timeS: number): number {
  const decade = 10 ** Math.floor(Math.log10(timeS) + 1e-9)
  for (const step of [5, 3, 2, 1]) if (step * decade <= timeS * (1 + 1e-9)) return Number((step * decade).toPrecision(3))
  return decade
}

/** Where a log axis begins [s]: the first sample after the stimulus, at most four decades before the end. */
export function logStart(firstS: number, lastS: number): number {
  return roundDown(Math.max(firstS, lastS * 1e-4))
}

/** Numbers stand at 1 and 3 of each decade, or at 1 alone where a decade has less than 110 px, and at the end if there is room. */
function logTicks(fromS: number, toS: number, place: (timeS: number) => number, room: number): AxisTick[] {
  const ticks: AxisTick[] = []
  const decadeWidth = place(10 * fromS) - place(fromS)
  const named = decadeWidth >= 110 ? [1, 3] : [1]
  const everySecond = decadeWidth < 34
  for (let power = Math.floor(Math.log10(fromS)); power <= Math.log10(toS) + 1e-9; power++)
    for (let step = 1; step <= 9; step++) {
      const at = Number((step * 10 ** power).toPrecision(3))
      if (at < fromS * (1 - 1e-9) || at > toS * (1 + 1e-9)) continue
      const numbered = named.includes(step) && !(everySecond && power % 2 !== 0)
      ticks.push({ at, text: numbered ? short(at) : null, major: step === 1 || numbered })
    }
  return withEnds(ticks, fromS, toS, place, room)
}

function withEnds(ticks: AxisTick[], fromS: number, toS: number, place: (timeS: number) => number, room: number): AxisTick[] {
  const numbered = () => ticks.filter(tick => tick.text !== null)
  for (const end of [toS, fromS]) {
    if (ticks.some(tick => tick.at === end && tick.text !== null)) continue
    const near = numbered().some(tick => Math.abs(place(tick.at) - place(end)) < room)
    if (near) continue
    const present = ticks.find(tick => tick.at === end)
    if (present) present.text = short(end)
    else ticks.push({ at: end, text: short(end), major: false })
  }
  return ticks
}

/**
 * The time axis of a frame.
 * @param kind log or linear
 * @param firstS first sample after the stimulus [s]
 * @param lastS last sample [s]
 * @param left left edge of the frame [px]
 * @param right right edge of the frame [px]
 */
export function timeAxis(kind: TimeScale, firstS: number, lastS: number, left: number, right: number): TimeAxis {
  if (kind === 'linear') {
    const scale = scaleLinear([0, lastS], [left, right])
    const count = Math.max(2, Math.floor((right - left) / 110))
    const ticks = scale.ticks(count).map(at => ({ at, text: short(at), major: true }))
    return { kind, fromS: 0, toS: lastS, place: scale, invert: x => scale.invert(x), ticks: withEnds(ticks, 0, lastS, scale, 36) }
  }
  const fromS = logStart(firstS, lastS)
  const scale = scaleLog([fromS, lastS], [left, right])
  return { kind, fromS, toS: lastS, place: scale, invert: x => scale.invert(x), ticks: logTicks(fromS, lastS, scale, 30) }
}

export interface ValueAxis { place: (value: number) => number, ticks: AxisTick[], from: number, to: number }
/** The fraction axis: 0 to 1, or a narrower range where nothing fills beyond a tenth. */
export function fractionAxis(highest: number, top: number, bottom: number): ValueAxis {
  const to = highest > 0.5 || highest <= 0 ? 1 : highest > 0.25 ? 0.5 : highest > 0.1 ? 0.25 : Math.max(0.01, scaleLinear([0, highest], [0, 1]).nice(5).domain()[1]!)
  const scale = scaleLinear([0, to], [bottom, top])
  const places = to >= 0.5 ? 1 : to >= 0.1 ? 2 : 3
  return { place: scale, from: 0, to, ticks: scale.ticks(5).map(at => ({ at, text: at.toFixed(places), major: true })) }
}

/** The axis of a difference strip [percentage points]: round ends around the band, zero inside, three to five numbers. */
export function differenceAxis(low: number, high: number, top: number, bottom: number): ValueAxis {
  const from = Math.min(low, -0.5)
  const to = Math.max(high, 0.5)
  const scale = scaleLinear([from, to], [bottom, top]).nice(4)
  const [first, last] = scale.domain() as [number, number]
  const ticks = scale.ticks(4).map(at => ({ at, text: String(Number(at.toPrecision(3))).replace('-', '\u2212'), major: true }))
  return { place: scale, from: first, to: last, ticks }
}
