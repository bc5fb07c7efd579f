/** Candidates and conditions as the document carries them: values, curves for drawing, residuals. */
import { exp, log } from '../elementary'
import type { WeighCandidate, WeighUp } from '../../schemas/weigh-up'
import { akaikeWeights } from '../criteria'
import { EXPLANATION_NAMES } from './explanations'
import { bareParameters, type WeighedParameter } from './intervals'
import { JointProblem, placeName } from './joint-problem'
import type { Found } from './search'
import { AHEAD, AHEAD_OF_ONE_KIND, criterionOf, type Ranked } from './verdict'
import type { Described, Weighing } from './weigh-up'

const GRID_POINTS = 61
const BEYOND = 1.15
/** Behind by so much more than the margin, an explanation reads as excluded. */
const EXCLUDED = 2

/** Times for drawing: even on a logarithmic axis, a little beyond the points on both sides [s]. */
function gridOf(timesS: Float64Array): number[] {
  const above = timesS.filter(time => time > 0), first = (above[0] ?? 1) / BEYOND, last = (above[above.length - 1] ?? 1) * BEYOND
  return Array.from({ length: GRID_POINTS }, (_, i) => first * exp(log(last / first) * i / (GRID_POINTS - 1)))
}

const finite = (value: number): number | null => Number.isFinite(value) ? value : null

/** Conditions as the document carries them, with the times of the drawn curves. */
export function describeConditions({ plain }: Weighing): WeighUp['conditions'] {
  return plain.conditions.map(one => ({
    condition: one.condition, protocol: one.protocol, manipulation: one.manipulation, aside: one.aside, gridS: gridOf(one.timesS),
    points: Array.from(one.timesS, (timeS, i) => ({ timeS, ratio: one.ratio[i]!, error: plain.noise.kind === 'scatter' ? null : one.error[i]!, sd: finite(one.sd[i]!), n: finite(one.n[i]!) })),
  }))
}

function curveAt(problem: JointProblem, found: Found, c: number, times: Float64Array): Float64Array {
  const ratio = new Float64Array(times.length)
  found.model.curve(problem.localOf(found.parameters, c), times, ratio, null)
  return ratio
}

function drawing(found: Found, { plain, typed }: Weighing): Pick<WeighCandidate, 'curves' | 'residuals'> {
  const problem = new JointProblem(found.model, plain.conditions, found.layout, typed)
  const scatter = plain.noise.kind === 'scatter' ? Math.sqrt(found.chi2 / Math.max(1, plain.points - found.parameters.length)) || 1 : 1
  return {
    curves: plain.conditions.map((one, c) => [...curveAt(problem, found, c, Float64Array.from(gridOf(one.timesS), time => time / plain.unitS))]),
    residuals: plain.conditions.map((one, c) => [...curveAt(problem, found, c, one.times)].map((value, i) => (one.ratio[i]! - value) / (one.error[i]! * scatter))),
  }
}

function parametersOf(found: Found, parameters: readonly WeighedParameter[]): WeighCandidate['parameters'] {
  const inverse = (value: number | null) => value === null || value === 0 ? null : 1 / value
  return parameters.map((one, i) => ({
    ...one, time: one.unit === '1/s' ? { valueS: 1 / one.value, lowS: inverse(one.high), highS: inverse(one.low) } : null,
    usedIn: found.layout.of.flatMap((slots, c) => slots.includes(i) ? [c] : []),
  }))
}

function changesOf(found: Found): WeighCandidate['changes'] {
  const { slots } = found.layout
  return [...found.changes].map(([manipulation, place]) => {
    const to = slots.findIndex(slot => slot.place === place && slot.manipulation === manipulation), protocol = slots[to]?.protocol ?? null
    const from = slots.findIndex(slot => slot.place === place && slot.manipulation === null && slot.protocol === protocol)
    return { manipulation, parameter: placeName(found.model, place), from: from < 0 ? null : from, to: to < 0 ? null : to }
  })
}

function readingOf(one: Ranked, { judgement }: Weighing): WeighCandidate['reading'] {
  if (one.explanation === judgement.explanation) return 'preferred'
  if (judgement.within.includes(one.explanation)) return 'within'
  return one.behind >= EXCLUDED * (one.explanation === 'one-kind' ? AHEAD_OF_ONE_KIND : AHEAD) ? 'excluded' : 'behind'
}

/**
 * All candidates, best first by the criterion.
 * @param weighing - what was found and judged
 * @param details - intervals of the best of each explanation
 * @returns candidates of the document
 */
export function describeCandidates(weighing: Weighing, details: ReadonlyMap<string, Described>): WeighCandidate[] {
  const { data, found, judgement } = weighing, ranked = new Map(judgement.ranked.map(one => [one.explanation, one]))
  const flat = [...found].flatMap(([explanation, list]) => list.map((one, i) => ({ explanation, one, best: i === 0, criterion: criterionOf(one, data, judgement.scale) })))
    .filter(({ criterion }) => Number.isFinite(criterion))
    .sort((a, b) => a.criterion - b.criterion)
  const weights = akaikeWeights(flat.map(({ criterion }) => criterion)), least = judgement.ranked[0]!.criterion
  return flat.map(({ explanation, one, best, criterion }, i) => {
    const rank = ranked.get(explanation)!, detail = best ? details.get(explanation) : undefined
    return {
      explanation, name: EXPLANATION_NAMES[explanation], changes: changesOf(one), best, chi2: one.chi2, dof: data.points - one.parameters.length, free: one.parameters.length,
      pValue: best ? rank.p : null, acceptable: best && rank.acceptable, criterion, behind: criterion - least, weight: weights[i]!, reading: best ? readingOf(rank, weighing) : 'other-change' as const,
      parameters: parametersOf(one, detail?.parameters ?? bareParameters(one, data)), correlations: detail?.correlations ?? [], ...best ? drawing(one, weighing) : { curves: [], residuals: [] },
    }
  })
}
