/** Which parameters a fit has: shared between which curves, free or held, between which bounds. */
import { log } from './elementary'
import { UNTOUCHED, type ConditionData } from '../recordings/types'
import { curveOf, type Curve, type Slot } from './curve-problem'
import { weightedPoints, type FitNote, type FitRefusal, type WeightedPoints, type Weights } from './point-errors'
import { PLACE, type ExponentialModel, type ParameterName } from './recovery-model'

/** One value for all curves, or one per protocol, manipulation or condition. */
export type Sharing = 'all' | 'protocol' | 'manipulation' | 'condition'

export interface FitOptions {
  model: ExponentialModel
  /** Default `sem`. */
  weights?: Weights
  freePlateau?: boolean
  /** Fitted; or the first stimulus empties all (the curve starts at 0); or a known depletion [1]. Default `free`. */
  depletion?: 'free' | 'complete' | number
  semFloor?: number
  pooledSd?: number
  /** Who shares what; what is not said is as in `USUAL_SHARING`. */
  share?: Partial<Record<ParameterName, Sharing>>
}

/** Points of one protocol share the depletion; conditions of one manipulation share all else. */
export const USUAL_SHARING: Record<ParameterName, Sharing> = { plateau: 'all', depletion: 'protocol', fastShare: 'manipulation', tauS: 'manipulation', tauFastS: 'manipulation', tauSlowS: 'manipulation' }

/** Bounds of plateau and depletion [1]. */
const PLATEAU = [0.1, 2] as const, DEPLETION = [0.05, 1] as const
/** Rates that are always allowed, slowest and fastest [1/s]; wider where the intervals ask for it. */
const RATES: Record<ExponentialModel, readonly [number, number]> = { one: [1e-3, 200], two: [1e-4, 200] }

export interface FitDesign {
  model: ExponentialModel
  conditions: readonly ConditionData[]
  curves: Curve[]
  slots: Slot[]
  /** Values that were held, by name. */
  held: { name: ParameterName, value: number }[]
  weighted: WeightedPoints
  notes: FitNote[]
  /** Shortest interval above 0 and longest [s]. */
  spanS: [number, number]
}

const groupOf = (condition: ConditionData, sharing: Sharing): string | null =>
  sharing === 'all' ? null : sharing === 'manipulation' ? condition.manipulation || UNTOUCHED : condition[sharing]

interface Place { place: number, name: ParameterName, bounds: readonly [number, number] }

function freePlaces({ model, freePlateau, depletion = 'free' }: FitOptions, [first, last]: [number, number]): Place[] {
  const [slowest, fastest] = RATES[model]
  const tau = [-log(Math.max(fastest, 10 / first)), -log(Math.min(slowest, 0.02 / last))] as const
  const places: Place[] = []
  if (freePlateau) places.push({ place: PLACE.plateau, name: 'plateau', bounds: PLATEAU })
  if (depletion === 'free') places.push({ place: PLACE.depletion, name: 'depletion', bounds: freePlateau ? [DEPLETION[0], PLATEAU[1]] : DEPLETION })
  if (model === 'one') return [...places, { place: PLACE.logTauFast, name: 'tauS', bounds: tau }]
  return [...places, { place: PLACE.fastShare, name: 'fastShare', bounds: [0, 1] }, { place: PLACE.logTauFast, name: 'tauFastS', bounds: tau }, { place: PLACE.logTauSlow, name: 'tauSlowS', bounds: tau }]
}

/** The order in which parameters are told. */
const TOLD: ParameterName[] = ['depletion', 'fastShare', 'tauS', 'tauFastS', 'tauSlowS', 'plateau']

function slotsOf(conditions: readonly ConditionData[], places: Place[], share: FitOptions['share'] = {}): Slot[] {
  const slots: Slot[] = []
  for (const { place, name, bounds: [lower, upper] } of places.sort((a, b) => TOLD.indexOf(a.name) - TOLD.indexOf(b.name))) {
    conditions.forEach((condition, curve) => {
      const group = conditions.length === 1 ? null : groupOf(condition, share[name] ?? USUAL_SHARING[name])
      const found = slots.find(slot => slot.place === place && slot.group === group)
      if (found) found.curves.push(curve)
      else slots.push({ name, place, group, lower, upper, curves: [curve] })
    })
  }
  return slots
}

/**
 * Lays out a fit of one or several conditions.
 * @param conditions - fitted together
 * @param options - model, weights, what is free, shared or held
 * @returns curves and free parameters, or why there is nothing to fit
 */
export function fitDesign(conditions: readonly ConditionData[], options: FitOptions): FitDesign | FitRefusal {
  const weighted = weightedPoints(conditions, { weights: options.weights ?? 'sem', semFloor: options.semFloor, pooledSd: options.pooledSd })
  if ('refused' in weighted) return weighted
  const times = weighted.points.flat().map(point => point.timeS), positive = times.filter(time => time > 0)
  const spanS: [number, number] = positive.length > 0 ? [Math.min(...positive), Math.max(...positive)] : [1, 1]
  const { depletion = 'free', freePlateau = false, model } = options
  const slots = slotsOf(conditions, freePlaces(options, spanS), options.share)
  const held = [1, typeof depletion === 'number' ? depletion : 1, 1, 0, 0]
  const curves = weighted.points.map((points, curve) => {
    const slotAt = (place: number) => slots.findIndex(slot => slot.place === place && slot.curves.includes(curve))
    const places = [0, 1, 2, 3, 4].map(slotAt)
    if (depletion === 'complete') places[PLACE.depletion] = places[PLACE.plateau]!
    const made = curveOf(points, places, held), factor = weighted.cells?.factors[curve]
    return factor ? { ...made, weights: made.weights.fill(1), whitening: factor } : made
  })
  const told: FitDesign['held'] = []
  if (!freePlateau) told.push({ name: 'plateau', value: 1 })
  if (typeof depletion === 'number' || (depletion === 'complete' && !freePlateau)) told.push({ name: 'depletion', value: held[1]! })
  return { model, conditions, curves, slots, held: told, weighted, notes: [...weighted.notes], spanS }
}
