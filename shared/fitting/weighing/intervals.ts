/** Values of a candidate in their own units, with profile intervals, correlations, and what the intervals cannot resolve. */
import { exp, log } from '../elementary'
import { studentQuantile975 } from '../../walk/normal'
import { covarianceOf, fitLeastSquares, SEARCH } from '../least-squares'
import { profileBounds } from '../profile-intervals'
import { JointProblem, placeName, type Slot, type TypedDepletion } from './joint-problem'
import type { WeighData } from './prepare'
import type { Found } from './search'

export interface WeighedParameter {
  name: string
  label: string
  unit: '1' | '1/s' | 's'
  /** Set where this is the value under a manipulation; null: without one. */
  manipulation: string | null
  /** Set for a depletion. */
  protocol: string | null
  value: number
  /** Ends of the 95 % interval; null: open on that side. */
  low: number | null
  high: number | null
  method: 'profile' | 'profile-cells' | 'profile-assumed-cells' | 'none'
  atBound: 'lower' | 'upper' | null
  /** Why these intervals do not resolve it. */
  unresolved: string | null
}
export interface Correlation { first: number, second: number, value: number }

/** Squared 97.5 % quantile of the normal law. */
const NORMAL_SQUARED = 3.841458820694124
const FAR = 5
const SMALL_SHARE = 0.15

/** A value of the fit in its own unit. */
function natural(found: Found, { place }: Slot, value: number, unitS: number): number {
  const parameter = found.model.parameters[place]
  if (!parameter) return value
  const own = parameter.log ? exp(value) : value
  return parameter.unit === '1/s' ? own / unitS : parameter.unit === 's' ? own * unitS : own
}

function boundOf(found: Found, i: number): 'lower' | 'upper' | null {
  const { lower, upper } = found.layout, value = found.parameters[i]!, near = 1e-7 * Math.max(1, upper[i]! - lower[i]!)
  return value - lower[i]! <= near ? 'lower' : upper[i]! - value <= near ? 'upper' : null
}

/** What a value outside the reach of the intervals means: it only adjusts the first or the last points. */
function unresolvedBy(found: Found, i: number, data: WeighData): string | null {
  const slot = found.layout.slots[i]!, parameter = found.model.parameters[slot.place], value = found.parameters[i]!
  if (!parameter) return value >= 1 - 1e-7 ? 'The depletion stands at 1; the fit uses it to adjust the first point.' : null
  const time = parameter.unit === '1/s' ? exp(-value) : parameter.unit === 's' ? exp(value) : null
  if (time !== null && time > FAR * data.last) return 'It is slower than these intervals reach.'
  if (time !== null && time < data.first / FAR) return 'It is faster than the shortest interval shows.'
  const quick = found.model.id === 'site-kinds' && slot.place === 0 && value < SMALL_SHARE && found.parameters[1]! > log(FAR / data.first)
  if (quick) return 'A small share of very quick sites only adjusts the first point.'
  return boundOf(found, i) ? 'It stands on the bound of what is searched.' : null
}

export interface IntervalSettings {
  typed: TypedDepletion
  /** max(1, χ²/dof) of the best fit [1]. */
  scale: number
  /** Degrees of freedom of the cells where the data carry their covariance [count]. */
  cellDof: number | null
  /** The same means with an assumed covariance: for depletions where cells are not given. */
  assumed: WeighData | null
}

function riseOf(found: Found, data: WeighData, { scale, cellDof }: IntervalSettings): number {
  const dof = data.points - found.parameters.length
  if (cellDof !== null) return studentQuantile975(cellDof) ** 2 * scale
  return data.noise.kind === 'scatter' ? studentQuantile975(Math.max(1, dof)) ** 2 * found.chi2 / Math.max(1, dof) : NORMAL_SQUARED * scale
}

interface Ends { low: number | null, high: number | null, method: WeighedParameter['method'] }

function profiles(found: Found, data: WeighData, settings: IntervalSettings): { ends: Ends[], correlations: Correlation[], better: Float64Array | null } {
  const problem = new JointProblem(found.model, data.conditions, found.layout, settings.typed), fit = fitLeastSquares(problem, found.parameters, SEARCH)
  const covariance = covarianceOf(fit), n = problem.parameters, rise = riseOf(found, data, settings), ends: Ends[] = []
  const error = (i: number) => Math.sqrt(covariance?.[i * n + i] ?? NaN)
  let better: Float64Array | null = fit.chi2 < found.chi2 - 1e-3 ? fit.parameters : null
  for (let i = 0; i < n && !better; i++) {
    const bounds = profileBounds(problem, fit.parameters, fit.chi2, i, rise, error(i) * Math.sqrt(Math.max(1, settings.scale)))
    better = bounds.better
    ends.push({ low: bounds.low, high: bounds.high, method: settings.cellDof === null ? 'profile' : 'profile-cells' })
  }
  const correlations: Correlation[] = []
  for (let a = 0; a < n; a++) for (let b = a + 1; b < n; b++) {
    const value = (covariance?.[a * n + b] ?? NaN) / (error(a) * error(b))
    if (Number.isFinite(value)) correlations.push({ first: a, second: b, value: Math.max(-1, Math.min(1, value)) })
  }
  return { ends, correlations, better }
}

/** Depletions of joint fits come out too narrow from means alone; with an assumed covariance they do not. */
function depletionEnds(found: Found, settings: IntervalSettings, ends: Ends[]): void {
  if (!settings.assumed) return
  const problem = new JointProblem(found.model, settings.assumed.conditions, found.layout, settings.typed), fit = fitLeastSquares(problem, found.parameters, SEARCH)
  const covariance = covarianceOf(fit), n = problem.parameters
  found.layout.slots.forEach((slot, i) => {
    if (slot.place !== found.model.parameters.length) return
    const bounds = profileBounds(problem, fit.parameters, fit.chi2, i, NORMAL_SQUARED, Math.sqrt(covariance?.[i * n + i] ?? NaN)), value = found.parameters[i]!
    // The two minima lie close together; an interval that misses the value itself would only confuse.
    if (!bounds.better && (bounds.low ?? -Infinity) <= value && (bounds.high ?? Infinity) >= value) ends[i] = { low: bounds.low, high: bounds.high, method: 'profile-assumed-cells' }
  })
}

/**
 * Parameters of a candidate with 95 % intervals.
 * @param found - a candidate at its minimum
 * @param data - that it was fitted to
 * @param settings - scatter, cells, typed depletions
 * @returns parameters in the order of the fit, correlations in the scale of the fit, and a better minimum where a profile met one
 */
export function describeParameters(found: Found, data: WeighData, settings: IntervalSettings): { parameters: WeighedParameter[], correlations: Correlation[], better: Float64Array | null } {
  const { ends, correlations, better } = profiles(found, data, settings)
  if (better) return { parameters: [], correlations, better }
  depletionEnds(found, settings, ends)
  return { parameters: bareParameters(found, data).map((one, i) => {
    const slot = found.layout.slots[i]!, { low, high, method } = ends[i]!
    const end = (value: number | null) => value === null ? null : natural(found, slot, value, data.unitS)
    return { ...one, low: end(low), high: end(high), method }
  }), correlations, better: null }
}

/**
 * Parameters of a candidate without intervals.
 * @param found - a candidate
 * @param data - that it was fitted to
 * @returns parameters in the order of the fit
 */
export function bareParameters(found: Found, data: WeighData): WeighedParameter[] {
  return found.layout.slots.map((slot, i) => {
    const parameter = found.model.parameters[slot.place]
    return {
      name: placeName(found.model, slot.place), label: parameter?.label ?? 'Depletion', unit: parameter?.unit ?? '1', manipulation: slot.manipulation, protocol: slot.place === found.model.parameters.length ? slot.protocol : null,
      value: natural(found, slot, found.parameters[i]!, data.unitS), low: null, high: null, method: 'none' as const, atBound: boundOf(found, i), unresolved: unresolvedBy(found, i, data),
    }
  })
}
