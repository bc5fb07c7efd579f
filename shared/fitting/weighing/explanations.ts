/** The explanations that a weigh-up compares: their parameters, bounds, first guesses and names. */
import { log } from '../elementary'
import { CURVES, type Curve } from './curves'

export const EXPLANATIONS = ['one-kind', 'site-kinds', 'limited-store', 'declining-drive', 'two-step', 'spread'] as const
export type Explanation = typeof EXPLANATIONS[number]
export const DEPLETION = 'depletion'

export interface ShapeParameter {
  name: string
  label: string
  unit: '1' | '1/s' | 's'
  /** Fitted as its logarithm. */
  log: boolean
  /** For times that end at 51.2 s; rates and times are scaled to that [own unit]. */
  lower: number
  upper: number
}

export interface ExplanationModel {
  id: Explanation | 'site-kinds-uneven'
  parameters: ShapeParameter[]
  curve: Curve
  /** First guesses for times up to 51.2 s, in the order of `parameters` [own units]. */
  starts: number[][]
  /** Two rates that may change places, with what else changes then. */
  exchange: { first: number, second: number, share: number | null, larger: 'first' | 'second' } | null
  /** Place of a parameter that each protocol but the first has for itself, and no manipulation changes; it is 0 for the first. */
  perProtocol?: number
}

const rate = (name: string, label: string, lower = 1e-3, upper = 200): ShapeParameter => ({ name, label, unit: '1/s', log: true, lower, upper })
const share = (name: string, label: string): ShapeParameter => ({ name, label, unit: '1', log: false, lower: 0, upper: 1 })
const siteParameters = [share('quickShare', 'Share of quick sites'), rate('quickRate', 'Quick rate'), rate('reluctantRate', 'Reluctant rate', 1e-4, 50)]

export const MODELS: Record<Explanation, ExplanationModel> = {
  'one-kind': { id: 'one-kind', parameters: [rate('rate', 'Rate')], curve: CURVES['one-kind'], starts: [[0.1], [0.5], [2]], exchange: null },
  'site-kinds': {
    id: 'site-kinds', parameters: siteParameters, curve: CURVES['site-kinds'],
    starts: [[0.6, 1.2, 0.05], [0.13, 30, 0.4], [0.4, 3, 0.2], [0.5, 0.4, 0.02], [0.8, 0.6, 0.05], [0.3, 8, 0.3]],
    exchange: { first: 1, second: 2, share: 0, larger: 'first' },
  },
  'limited-store': {
    id: 'limited-store', curve: CURVES['limited-store'],
    parameters: [rate('ableRate', 'Rate by able vesicles'), rate('poorRate', 'Rate by poor vesicles', 1e-4, 50), { name: 'storePerSite', label: 'Able vesicles per site', unit: '1', log: true, lower: 0.02, upper: 20 }],
    starts: [[1.2, 0.05, 0.5], [2, 0.1, 0.3], [0.6, 0.02, 0.8], [0.5, 0.05, 2], [4, 0.2, 0.15]], exchange: null,
  },
  'declining-drive': {
    id: 'declining-drive', curve: CURVES['declining-drive'],
    // The bounds of the decline follow the intervals: `boundsOf`.
    parameters: [rate('startRate', 'Rate just after the stimulus'), share('restingPart', 'Resting part of the rate'), { name: 'declineTime', label: 'Time of decline', unit: 's', log: true, lower: 0.05, upper: 256 }],
    starts: [[1.5, 0.05, 0.8], [4, 0.1, 0.06], [0.8, 0.1, 2], [0.5, 0.02, 4], [0.4, 0.3, 1], [4, 0.05, 0.2]], exchange: null,
  },
  'two-step': {
    id: 'two-step', parameters: [rate('slowerStep', 'Rate of the slower step'), rate('fasterStep', 'Rate of the faster step', 1e-3, 2000)], curve: CURVES['two-step'],
    starts: [[0.3, 10], [1, 5], [0.1, 1], [0.1, 100]], exchange: { first: 0, second: 1, share: null, larger: 'second' },
  },
  'spread': {
    id: 'spread', parameters: [rate('medianRate', 'Median rate'), { name: 'logRateVariance', label: 'Variance of ln rate', unit: '1', log: false, lower: 0, upper: 16 }], curve: CURVES.spread,
    starts: [[0.3, 1], [0.5, 4], [0.1, 0.25]], exchange: null,
  },
}

/** Two kinds of site of which the first stimulus may empty unequal parts: for the sensitivity only. */
export const UNEVEN_SITES: ExplanationModel = {
  id: 'site-kinds-uneven', curve: CURVES['site-kinds-uneven'], exchange: null, perProtocol: 3,
  parameters: [...siteParameters, { name: 'emptyingOdds', label: 'Odds by which quick sites are emptied more', unit: '1', log: true, lower: 0.02, upper: 50 }],
  starts: MODELS['site-kinds'].starts.map(start => [...start, 1]),
}

/** What an explanation is called in a sentence. */
export const EXPLANATION_NAMES: Record<Explanation, string> = {
  'one-kind': 'one kind of site', 'site-kinds': 'two kinds of site', 'limited-store': 'a limited store', 'declining-drive': 'a declining drive',
  'two-step': 'two steps', 'spread': 'a spread of rates',
}

/** Names that take a verb in the plural. */
export const SPOKEN_AS_MANY: ReadonlySet<Explanation> = new Set(['site-kinds', 'two-step'])

/** The last interval that guesses and bounds are made for [s]. */
export const REFERENCE_LAST_S = 51.2

/**
 * Bounds of a shape parameter in the scale of the search.
 * @param parameter - one of a model's
 * @param firstS - shortest interval, scaled [s]
 * @param lastS - longest interval, scaled [s]
 * @returns lower and upper bound in the fitted scale (logarithm or as it is) [own unit]
 */
export function boundsOf(parameter: ShapeParameter, firstS: number, lastS: number): [lower: number, upper: number] {
  const [lower, upper] = parameter.unit === 's' ? [firstS, 5 * lastS] : [parameter.lower, parameter.upper]
  return parameter.log ? [log(lower), log(upper)] : [lower, upper]
}
