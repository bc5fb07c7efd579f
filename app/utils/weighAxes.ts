/** Axes of a weigh-up figure: intervals on one log axis for all conditions, ratios from 0 to a little above 1, strips in standard errors or in ratio. */
import { scaleLinear, scaleLog } from 'd3-scale'
import type { WeighCandidate, WeighUp } from '#shared/schemas/weigh-up'
import type { AxisTick, TimeAxis, ValueAxis } from './figureAxis'

/** Strips reach so many standard errors to both sides; what lies beyond becomes a triangle. */
export const STRIP_REACH = 8
/** Room beyond the first and the last interval, as a factor: curves reach 1.15. */
const BEYOND = 1.3

/** Positive intervals of every condition, as the axis shows them [s]. */
function rangeOf(conditions: WeighUp['conditions']): readonly [number, number] {
  const times = conditions.flatMap(one => one.points.map(point => point.timeS).filter(timeS => timeS > 0))
  if (times.length === 0) return [0.1, 10]
  const from = Math.min(...times) / BEYOND, to = Math.max(...times) * BEYOND
  // Less than a decade has too few round numbers.
  const widen = Math.max(1, Math.sqrt(10 * from / to))
  return [from / widen, to * widen]
}

/** Numbers stand at whole decades where there is room for them and at least two are in view, else at 2 and 5 too. */
export function intervalAxis(conditions: WeighUp['conditions'], left: number, right: number): TimeAxis {
  const [fromS, toS] = rangeOf(conditions)
  const scale = scaleLog([fromS, toS], [left, right])
  const decadePx = (right - left) / Math.log10(toS / fromS)
  const every = Math.max(1, Math.ceil(30 / decadePx))
  const powers = Array.from({ length: Math.ceil(Math.log10(toS)) - Math.floor(Math.log10(fromS)) + 1 }, (_, i) => Math.floor(Math.log10(fromS)) + i)
  const places = powers.flatMap(power => [1, 2, 3, 4, 5, 6, 7, 8, 9].map(step => ({ step, power, at: Number(`${step}e${power}`) }))).filter(({ at }) => at >= fromS && at <= toS)
  const named = places.filter(({ step }) => step === 1).length >= 2 ? [1] : [1, 2, 5]
  const ticks: AxisTick[] = places.map(({ step, power, at }) => ({ at, text: named.includes(step) && power % every === 0 ? String(at) : null, major: step === 1 }))
  return { kind: 'log', fromS, toS, place: scale, invert: x => scale.invert(x), ticks }
}

/** From 0, or from below where a ratio is, to what is drawn and at least to 1, with room above; no error bar is cut that begins inside 2. */
export function ratioAxis(conditions: WeighUp['conditions'], candidates: readonly WeighCandidate[], top: number, bottom: number): ValueAxis {
  const points = conditions.flatMap(one => one.points.flatMap(({ ratio, error }) => [ratio - (error ?? 0), ratio + (error ?? 0)]))
  const all = [...points, ...candidates.flatMap(one => one.curves.flat())].filter(Number.isFinite)
  const low = Math.min(0, ...all), high = Math.max(1, ...all)
  const from = low < 0 ? low - 0.02 * (high - low) : 0, to = high + 0.05 * (high - low)
  const scale = scaleLinear([from, to], [bottom, top])
  const count = Math.max(2, Math.min(6, Math.floor((bottom - top) / 32)))
  const written = scale.tickFormat(count)
  return { place: scale, from, to, ticks: scale.ticks(count).map(at => ({ at, text: written(at), major: true })) }
}

/**
 * Standard error that a residual was divided by.
 * @param error - of the point, where it is known [1]
 * @param candidate - fit whose scatter tells it where not
 * @returns standard error [1]
 */
export function errorOf(error: number | null, candidate: Pick<WeighCandidate, 'chi2' | 'dof'>): number {
  return error ?? (Math.sqrt(candidate.chi2 / Math.max(1, candidate.dof)) || 1)
}

/** How far strips in ratio reach to both sides: eight of the middle standard error, rounded up to 1, 2 or 5 of a decade [1]. */
export function ratioReach(conditions: WeighUp['conditions'], leading: WeighCandidate | undefined): number {
  const errors = conditions.flatMap(one => one.points.map(({ error }) => error ?? (leading ? errorOf(null, leading) : 1))).filter(error => error > 0).sort((a, b) => a - b)
  const wanted = STRIP_REACH * (errors[Math.floor(errors.length / 2)] ?? 0.0125)
  const decade = 10 ** Math.floor(Math.log10(wanted))
  return Number(([1, 2, 5, 10].find(step => step * decade >= wanted * (1 - 1e-9))! * decade).toPrecision(1))
}
