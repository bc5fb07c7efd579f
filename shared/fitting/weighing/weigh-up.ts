/** A weigh-up from recordings to its document, in steps that a worker can report and stop. */
import type { ConditionData } from '../../recordings/types'
import type { WeighSettings, WeighUp } from '../../schemas/weigh-up'
import { digestOf } from '../../walk/digest'
import { FITTING_VERSION } from '../version'
import { pooledSdOf, refusal, type FitRefusal } from '../point-errors'
import { describeCandidates, describeConditions } from './describe'
import { doubtsOf } from './doubts'
import { EXPLANATIONS, MODELS, type Explanation } from './explanations'
import { describeParameters, type Correlation, type IntervalSettings, type WeighedParameter } from './intervals'
import type { TypedDepletion } from './joint-problem'
import { prepare, type WeighData } from './prepare'
import { resampleCells } from './resample'
import { refit, searchAll, type Found } from './search'
import { noiseOf, notesOf, spreadSentence, verdictOf } from './sentences'
import { settleTie } from './settle'
import { judge, type Judgement } from './verdict'
import { cellNoise, withAssumedCells, withCells, type CellNoise } from './whiten'

/** How far a weigh-up is: parts of the whole by rough cost. */
export interface WeighProgress { stage: 'search' | 'intervals' | 'settle' | 'resample', explanation: Explanation | null, done: number, total: number }

export interface WeighInput {
  conditions: readonly ConditionData[]
  settings: WeighSettings
  /** Conditions over which the SD is pooled where `settings.pooledSd` is null; these by default. */
  pool?: readonly ConditionData[]
  /** Asked before each resample: true ends the resampling and keeps what is done, marked partial. */
  stopResampling?: () => boolean
}

/** What every part of a weigh-up works from. */
export interface Weighing {
  /** As prepared, for residuals and errors; and as fitted: the same, or with the covariance of cells. */
  plain: WeighData
  data: WeighData
  typed: TypedDepletion
  cells: CellNoise | null
  explanations: Explanation[]
  found: Map<Explanation, Found[]>
  judgement: Judgement
}

/** What describes the best candidate of an explanation. */
export interface Described { parameters: WeighedParameter[], correlations: Correlation[] }

/** Typed depletions by protocol. */
export function typedOf(settings: WeighSettings): TypedDepletion {
  return Object.fromEntries(settings.typedDepletion.map(({ protocol, value }) => [protocol, value]))
}

/** Free parameters of an explanation on these data, without counting on a change of depletion. */
function parametersNeeded(explanation: Explanation, data: WeighData, typed: TypedDepletion): number {
  return MODELS[explanation].parameters.length + data.protocols.filter(protocol => typed[protocol] === undefined).length + data.manipulations.length
}

function refuseData(data: WeighData, explanations: readonly Explanation[]): FitRefusal | null {
  if (data.points === 0) return refusal('no-points', 'No point counts; there is nothing to weigh.')
  if (!Number.isFinite(data.last)) return refusal('no-intervals', 'Every interval is 0; a recovery needs intervals above it.')
  if (explanations.length < 2) return refusal('too-few-points', `${data.points} points are too few to weigh explanations: two phases on these conditions have ${parametersNeeded('site-kinds', data, {})} parameters and need more points than that.`)
  const ratios = data.conditions.flatMap(one => [...one.ratio])
  if (Math.max(...ratios) - Math.min(...ratios) < 1e-9) return refusal('flat', 'All ratios are equal; there is no recovery to weigh.')
  return null
}

/** Conditions of one name would be taken for one another. */
function duplicateNames(conditions: readonly ConditionData[]): string | undefined {
  return conditions.find((one, i) => conditions.findIndex(other => other.condition === one.condition) !== i)?.condition
}

/** Digits that a document keeps. */
const DIGITS = 10
/** The pooled SD as the document will carry it, so that weighing again from the document gives its numbers again. */
function roundedSd(pool: readonly ConditionData[]): number | undefined {
  const sd = pooledSdOf(pool)
  return sd === null ? undefined : Number(sd.toPrecision(DIGITS))
}

/**
 * Prepares data for weighing.
 * @param input - recordings and settings
 * @returns data as fitted, or why there is nothing to weigh
 */
export function readyToWeigh(input: WeighInput): FitRefusal | Pick<Weighing, 'plain' | 'data' | 'typed' | 'cells' | 'explanations'> {
  const { conditions, settings, pool = conditions } = input, twice = duplicateNames(conditions)
  if (twice !== undefined) return refusal('same-name', `Two conditions are called “${twice}”; give each its own name.`)
  const typed = typedOf(settings), plain = prepare(conditions, pool, settings.pooledSd ?? roundedSd(pool)), cells = settings.cells ? cellNoise(plain, conditions) : null
  const explanations = EXPLANATIONS.filter(one => parametersNeeded(one, plain, typed) + (plain.noise.kind === 'scatter' ? 2 : 0) < plain.points)
  return refuseData(plain, explanations) ?? { plain, data: cells ? withCells(plain, cells, conditions) : plain, typed, cells, explanations }
}

function* searched(ready: Pick<Weighing, 'data' | 'typed' | 'explanations'>, total: number): Generator<WeighProgress, Map<Explanation, Found[]>> {
  const steps = searchAll(ready.data, { typed: ready.typed }, ready.explanations)
  let step = steps.next()
  for (; !step.done; step = steps.next()) yield { stage: 'search', explanation: step.value, done: ready.explanations.indexOf(step.value), total }
  return step.value
}

/** Intervals of the best of each explanation; a better minimum met on the way takes its place. */
function* described(weighing: Omit<Weighing, 'judgement'>, total: number): Generator<WeighProgress, Map<Explanation, Described>> {
  const { plain, data, typed, cells, found } = weighing, all = new Map<Explanation, Described>(), assumed = cells ? null : withAssumedCells(plain)
  for (const [explanation, list] of found) {
    yield { stage: 'intervals', explanation, done: weighing.explanations.length, total }
    for (let tries = 0; tries < 4 && list[0]; tries++) {
      const settings: IntervalSettings = { typed, scale: judge(found, data, { typed, cells: cells !== null }).scale, cellDof: cells?.variance.dof ?? null, assumed }
      const { parameters, correlations, better } = describeParameters(list[0], data, settings)
      if (!better) {
        all.set(explanation, { parameters, correlations })
        break
      }
      list[0] = refit({ ...list[0], parameters: better }, data, typed)
    }
  }
  return all
}

/**
 * Search and verdict alone, without intervals or document: for calibrations and plans.
 * @param input - recordings, settings
 * @returns what was found and judged, or why there is nothing to weigh
 */
export function weighQuickly(input: WeighInput): Weighing | FitRefusal {
  const ready = readyToWeigh(input)
  if ('refused' in ready) return ready
  const steps = searchAll(ready.data, { typed: ready.typed }, ready.explanations)
  let step = steps.next()
  while (!step.done) step = steps.next()
  return { ...ready, found: step.value, judgement: judge(step.value, ready.data, { typed: ready.typed, cells: ready.cells !== null }) }
}

/** Numbers with ten digits: what is beyond them differs between machines and says nothing. */
function rounded(value: unknown): unknown {
  if (typeof value === 'number') return Number.isFinite(value) ? Number(value.toPrecision(DIGITS)) : null
  if (Array.isArray(value)) return value.map(rounded)
  if (value !== null && typeof value === 'object') return Object.fromEntries(Object.entries(value).map(([key, one]) => [key, rounded(one)]))
  return value
}

/**
 * Weighs the explanations on recordings.
 * @param input - recordings, settings
 * @returns the document, or why there is none. Yields its progress between fits: a caller that stops asking stops the weigh-up.
 */
export function* weighUpSteps(input: WeighInput): Generator<WeighProgress, WeighUp | FitRefusal> {
  const ready = readyToWeigh(input)
  if ('refused' in ready) return ready
  const total = ready.explanations.length + 2
  const found = yield* searched(ready, total)
  const details = yield* described({ ...ready, found }, total)
  const weighing: Weighing = { ...ready, found, judgement: judge(found, ready.data, { typed: ready.typed, cells: ready.cells !== null }) }
  yield { stage: 'settle', explanation: null, done: total - 1, total }
  const settle = settleTie(weighing)
  const resample = input.settings.resamples > 0 ? yield* resampleCells(weighing, input) : null
  const candidates = describeCandidates(weighing, details)
  const document = rounded({
    format: 'moorage-weigh-up', version: 1, engineVersion: FITTING_VERSION, settings: { ...input.settings, pooledSd: input.settings.pooledSd ?? ready.plain.noise.pooledSd },
    conditions: describeConditions(weighing), untouched: ready.plain.untouched, noise: noiseOf(weighing), criterion: ready.data.noise.kind === 'scatter' ? 'aicc' : 'chi2', candidates,
    left: EXPLANATIONS.filter(one => !ready.explanations.includes(one)).map(explanation => ({ explanation, reason: 'It has as many parameters as there are points, or more.' })),
    spread: spreadSentence(weighing), verdict: verdictOf(weighing, candidates), doubts: doubtsOf(weighing, candidates, input), settle, resample, notes: notesOf(weighing, input),
  }) as Omit<WeighUp, 'digest'>
  return { ...document, digest: digestOf(document) }
}

/**
 * Weighs at once.
 * @param input - recordings, settings
 * @param report - hears of progress; returns false to stop
 * @returns the document, or why there is none; null where it was stopped
 */
export function weighUp(input: WeighInput, report: (progress: WeighProgress) => boolean = () => true): WeighUp | FitRefusal | null {
  const steps = weighUpSteps(input)
  for (let step = steps.next(); ; step = steps.next()) {
    if (step.done) return step.value
    if (!report(step.value)) return null
  }
}
