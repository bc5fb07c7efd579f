/** Fits of one or two exponentials to one condition, or to several that share parameters: values, errors, intervals, criterion, warnings. */
import { exp } from './elementary'
import { studentQuantile975 } from '../walk/normal'
import type { ConditionData } from '../recordings/types'
import type { CellVariance } from './cell-covariance'
import { excessScatter, knownErrorCriterion, scatterCriteria } from './criteria'
import { isLogarithmic, placesOf } from './curve-problem'
import { fitDesign, type FitDesign, type FitOptions } from './fit-design'
import { isResolved, notesOf, refusalOf } from './fit-notes'
import { inOrder, polish, searchFit, startsFromOne, type FoundFit } from './fit-search'
import { covarianceOf } from './least-squares'
import type { FitNote, FitRefusal, Weights } from './point-errors'
import { profileBounds } from './profile-intervals'
import { PLACES, recoveryAt, type ExponentialModel, type NamedValue, type ParameterName } from './recovery-model'

export interface FitParameter {
  name: ParameterName
  /** `1` or `s`. */
  unit: '1' | 's'
  value: number
  /** Null where the parameter stands on its bound, or the data do not determine it. */
  se: number | null
  /** 95 % profile interval; null at an end that the data leave open. */
  low: number | null
  high: number | null
  atBound: boolean
  /** Protocol, manipulation or condition that it belongs to; null where it is common to all. */
  group: string | null
}

export interface FitResidual { condition: string, intervalS: number, ratio: number, error: number | null, fitted: number, residual: number }

export interface RecoveryFit {
  /** Points that were used [count]. */
  points: number
  model: ExponentialModel
  weights: Weights
  parameters: FitParameter[]
  /** Not estimated, by name [1]. */
  held: NamedValue[]
  /** Weighted sum of squared residuals [1]; without weights the plain one. */
  chi2: number
  dof: number
  /** s: what χ² is divided by in the criterion [1]; 1 without weights. Intervals use the fit's own max(1, χ²/dof). */
  scale: number
  /** χ²/s + 2k; without weights AICc, and null where it is not defined [1]. */
  criterion: number | null
  converged: boolean
  /** False where a warning keeps the values from being a result, or two exponentials from being claimed. */
  resolved: boolean
  warnings: FitNote[]
  /** Parameters × parameters [1]; null where a parameter has no error. */
  correlations: (number | null)[][]
  residuals: FitResidual[]
  /** SD between cells that pooled weights were made of [1]. */
  pooledSd: number | null
  /** With weights by cells: SD of a cell's point about its own curve [1], SD between cells of the logarithm of all rates and of the depletion [1], and Σ(cells − 1). */
  betweenCells: CellVariance | null
}

/** 95 % point of χ² with one degree of freedom. */
const RISE_95 = 3.841458820694124

/** How far χ² may rise: 3.84·s with known errors; by Student's t at Σ(cells − 1) with cells, and on the scatter without weights. */
function riseOf({ weighted: { weights, cells } }: FitDesign, chi2: number, dof: number, scale: number): number | null {
  if (cells) return studentQuantile975(cells.variance.dof) ** 2 * scale
  if (weights !== 'none') return RISE_95 * scale
  return dof > 0 && chi2 > 0 ? chi2 / dof * studentQuantile975(dof) ** 2 : null
}

interface Estimated { found: FoundFit, intervals: { low: number | null, high: number | null }[], errors: number[], correlations: (number | null)[][] }

function errorsOf(design: FitDesign, found: FoundFit, dof: number): Pick<Estimated, 'errors' | 'correlations'> {
  const n = design.slots.length, covariance = covarianceOf(found)
  const variance = design.weighted.weights === 'none' ? (dof > 0 ? found.chi2 / dof : NaN) : 1
  const at = (i: number, j: number) => covariance ? covariance[i * n + j]! : NaN
  const errors = Array.from({ length: n }, (_, j) => Math.sqrt(variance * at(j, j)))
  const correlations = errors.map((_, i) => errors.map((_, j) => {
    const value = at(i, j) / Math.sqrt(at(i, i) * at(j, j))
    return Number.isFinite(value) ? Math.max(-1, Math.min(1, value)) : null
  }))
  return { errors, correlations }
}

/** Profiles every parameter; a better minimum met on the way is taken and all is profiled again. */
function estimate(design: FitDesign, first: FoundFit, dof: number, scaleOf: (chi2: number) => number): Estimated {
  let found = first
  for (let round = 0; ; round++) {
    const known = errorsOf(design, found, dof), rise = riseOf(design, found.chi2, dof, scaleOf(found.chi2))
    let better: Float64Array | null = null
    const intervals = found.parameters.reduce<Estimated['intervals']>((list, _, j) => {
      if (rise === null || (better && round < 3)) return [...list, { low: null, high: null }]
      const ends = profileBounds(found.problem, found.parameters, found.chi2, j, rise, known.errors[j]!)
      better = ends.better ?? better
      return [...list, ends]
    }, [])
    if (!better || round >= 3) return { found, intervals, ...known }
    found = { ...polish(found.problem, inOrder(design, better), found.converged), problem: found.problem }
  }
}

function parametersOf({ slots }: FitDesign, { found, intervals, errors }: Estimated): FitParameter[] {
  return slots.map((slot, j) => {
    const log = isLogarithmic(slot), x = found.parameters[j]!, { low, high } = intervals[j]!
    const natural = (value: number | null) => value === null ? null : log ? exp(value) : value
    const value = natural(x)!, se = log ? value * errors[j]! : errors[j]!
    return { name: slot.name, unit: log ? 's' : '1', value, se: Number.isFinite(se) ? se : null, low: natural(low), high: natural(high), atBound: found.atBound[j]!, group: slot.group }
  })
}

function residualsOf({ curves, conditions, weighted }: FitDesign, x: Float64Array): FitResidual[] {
  const at = new Float64Array(PLACES)
  return curves.flatMap((curve, i) => {
    placesOf(curve, x, at)
    return weighted.points[i]!.map(({ timeS, ratio, error }) => {
      const fitted = recoveryAt(at, timeS)
      return { condition: conditions[i]!.condition, intervalS: timeS, ratio, error: weighted.weights === 'none' ? null : error, fitted, residual: ratio - fitted }
    })
  })
}

export interface SearchedFit { design: FitDesign, found: FoundFit }

/**
 * Lays out and searches, without errors and intervals: what resampling and comparisons start from.
 * @param conditions - fitted together
 * @param options - model, weights, what is free, shared or held
 * @returns design and minimum, or why there is none
 */
export function searchConditions(conditions: readonly ConditionData[], options: FitOptions): SearchedFit | FitRefusal {
  const design = fitDesign(conditions, options)
  if ('refused' in design) return design
  const refused = refusalOf(design)
  return refused ?? { design, found: searchFit(design, [...startsOfParts(conditions, options, design), ...startsOfOne(conditions, options, design)]) }
}

/** For two exponentials, starts from the fit of one. */
function startsOfOne(conditions: readonly ConditionData[], options: FitOptions, two: FitDesign): Float64Array[] {
  if (options.model === 'one') return []
  const { tauFastS: tauS, ...share } = options.share ?? {}, one = fitDesign(conditions, { ...options, model: 'one', share: tauS ? { ...share, tauS } : share })
  return 'refused' in one ? [] : startsFromOne(two, one, searchFit(one).parameters)
}

/** Starts from the fit of each condition alone: every shared parameter at the mean of its parts. */
function startsOfParts(conditions: readonly ConditionData[], options: FitOptions, design: FitDesign): Float64Array[] {
  if (conditions.length < 2) return []
  const alone = conditions.map((condition) => {
    const part = fitDesign([condition], options)
    return 'refused' in part || refusalOf(part) ? null : { slots: part.slots, x: searchFit(part).parameters }
  })
  const valueOf = (curve: number, place: number) => {
    const one = alone[curve], j = one?.slots.findIndex(slot => slot.place === place) ?? -1
    return one && j >= 0 ? one.x[j]! : null
  }
  if (alone.every(one => one === null)) return []
  return [Float64Array.from(design.slots, ({ place, curves, lower, upper }) => {
    const values = curves.map(curve => valueOf(curve, place)).filter(value => value !== null)
    return values.length > 0 ? values.reduce((sum, one) => sum + one, 0) / values.length : (lower + upper) / 2
  })]
}

/**
 * Errors, intervals, criterion and warnings of a fit that was searched.
 * @param searched - design and minimum
 * @param scale - s of the best fit among those compared; of this fit where it stands alone [1]
 * @returns the fit
 */
export function finishFit({ design, found: first }: SearchedFit, scale?: number): RecoveryFit {
  const { weighted, slots, model, held } = design, points = first.residuals.length, dof = points - slots.length
  const known = weighted.weights !== 'none', scaleOf = (chi2: number) => known ? excessScatter(chi2, dof) : 1
  const estimated = estimate(design, first, dof, scaleOf), { found } = estimated, s = scale ?? scaleOf(found.chi2)
  const parameters = parametersOf(design, estimated)
  const criterion = known ? knownErrorCriterion(found.chi2, s, slots.length) : found.chi2 > 0 ? scatterCriteria(points, found.chi2, slots.length + 1).aicc : null
  const warnings = notesOf(design, { parameters, chi2: found.chi2, dof, converged: found.converged, criterion })
  return {
    points, model, weights: weighted.weights, parameters, held, chi2: found.chi2, dof, scale: s, criterion, converged: found.converged,
    resolved: isResolved(warnings), warnings, correlations: estimated.correlations,
    residuals: residualsOf(design, found.parameters), pooledSd: weighted.pooledSd, betweenCells: weighted.cells?.variance ?? null,
  }
}

/**
 * Fits one condition.
 * @param condition - its points; those set aside stay out
 * @param options - model and weights
 * @returns the fit, or why there is none
 */
export function fitCondition(condition: ConditionData, options: FitOptions): RecoveryFit | FitRefusal {
  return fitConditions([condition], options)
}

/**
 * Fits several conditions together, with the parameters shared that `options.share` names.
 * @param conditions - fitted together
 * @param options - model, weights, sharing
 * @returns the fit, or why there is none
 */
export function fitConditions(conditions: readonly ConditionData[], options: FitOptions): RecoveryFit | FitRefusal {
  const searched = searchConditions(conditions, options)
  return 'refused' in searched ? searched : finishFit(searched)
}
