/** What would settle a tie: which added condition would part the explanations that stand, by their own fitted curves. */
import { log } from '../elementary'
import type { WeighSettle } from '../../schemas/weigh-up'
import { EXPLANATION_NAMES, MODELS, SPOKEN_AS_MANY, type Explanation } from './explanations'
import { JointProblem, placeName } from './joint-problem'
import type { WeighCondition, WeighData } from './prepare'
import { ExplanationSearch } from './search'
import { AHEAD, AHEAD_OF_ONE_KIND, type Ranked } from './verdict'
import type { Weighing } from './weigh-up'

const SHORT_DEPLETION = 0.35
const USUAL_CELLS = 8
/** How strongly a manipulation is taken to act: rates to a quarter, shares to a third, the variance to twice. */
const FACTOR = { log: 1 / 4, share: 1 / 3, variance: 2 } as const
const MOST_TIED = 4
const PLANNED = '\u0001planned'

interface Design { what: 'short-step' | 'manipulation', truth: Ranked, place: number | null, factor: number }
type Pair = WeighSettle['pairs'][number]

const needed = (a: Explanation, b: Explanation) => a === 'one-kind' || b === 'one-kind' ? AHEAD_OF_ONE_KIND : AHEAD
const median = (values: number[]) => values.sort((a, b) => a - b)[Math.floor(values.length / 2)]!

/** The condition that a design adds, as its truth would show it without noise. */
function planned({ truth, what, place, factor }: Design, { data, typed }: Weighing): WeighCondition {
  const { found } = truth, at = data.conditions.findIndex(one => one.manipulation === data.untouched), pattern = data.conditions[at]!
  const problem = new JointProblem(found.model, data.conditions, found.layout, typed), local = Float64Array.from(problem.localOf(found.parameters, at)), last = local.length - 1
  if (what === 'short-step') local[last] = SHORT_DEPLETION
  else local[place!] = found.model.parameters[place!]!.log ? local[place!]! + log(factor) : local[place!]! * factor
  const ratio = new Float64Array(pattern.times.length)
  found.model.curve(local, pattern.times, ratio, null)
  const cells = pattern.n.some(n => n > 0) ? median([...pattern.n].filter(n => n > 0)) : USUAL_CELLS
  const error = new Float64Array(pattern.times.length).fill(data.noise.pooledSd ? data.noise.pooledSd / Math.sqrt(cells) : median([...pattern.error]))
  return { ...pattern, condition: PLANNED, protocol: what === 'short-step' ? PLANNED : pattern.protocol, manipulation: what === 'manipulation' ? PLANNED : data.untouched, ratio, error, whiten: null, n: pattern.n.map(() => cells) }
}

/** Expected distance of each rival behind the truth once the design is done, in units of the criterion. */
function pairsOf(design: Design, tied: readonly Ranked[], weighing: Weighing): Pair[] {
  const { data, typed, judgement } = weighing, scale = data.noise.kind === 'scatter' ? Math.max(1e-300, design.truth.found.chi2 / Math.max(1, design.truth.dof)) : judgement.scale
  const wider: WeighData = { ...data, conditions: [...data.conditions, planned(design, weighing)], points: data.points + data.conditions[0]!.times.length }
  return tied.filter(one => one !== design.truth).flatMap((rival) => {
    const fitted = new ExplanationSearch(MODELS[rival.explanation], wider, { typed }).extended(rival.found, PLANNED)
    return fitted ? [{ truth: design.truth.explanation, rival: rival.explanation, gain: (fitted.chi2 - design.truth.found.chi2) / scale + 2 * (rival.free - design.truth.free) }] : []
  })
}

function designsFor(truth: Ranked, { data }: Weighing): Design[] {
  const shapes = truth.found.model.parameters.map((parameter, place): Design => ({ what: 'manipulation', truth, place, factor: parameter.log ? FACTOR.log : parameter.upper > 1 ? FACTOR.variance : FACTOR.share }))
  return data.protocols.length > 1 ? shapes : [{ what: 'short-step', truth, place: null, factor: 1 }, ...shapes]
}

function words({ truth, what, place, factor }: Design, pairs: readonly Pair[]): string {
  const label = place === null ? '' : truth.found.model.parameters[place]!.label.toLowerCase(), size = factor < 0.3 ? 'a quarter' : factor < 1 ? 'a third' : 'twice its value'
  const act = what === 'short-step' ? `a weaker first stimulus is added (depletion ${SHORT_DEPLETION}, the same intervals and cells)` : `a manipulation is added that brings its ${label} to ${size}`
  const parts = pairs.map(({ rival, gain, truth: own }) => `${EXPLANATION_NAMES[rival]} ${gain >= needed(own, rival) ? `${SPOKEN_AS_MANY.has(rival) ? 'fall' : 'falls'} ${gain < 10 ? gain.toFixed(1) : Math.round(gain)} behind` : `${SPOKEN_AS_MANY.has(rival) ? 'stay' : 'stays'} too near (${gain.toFixed(1).replace('-', '−')})`}`)
  return `If ${EXPLANATION_NAMES[truth.explanation]} ${SPOKEN_AS_MANY.has(truth.explanation) ? 'are' : 'is'} true and ${act}, ${parts.join(' and ')}; ${AHEAD} is needed${pairs.some(one => one.rival === 'one-kind') ? `, ${AHEAD_OF_ONE_KIND} against one kind` : ''}.`
}

function settled(design: Design, tied: readonly Ranked[], weighing: Weighing): WeighSettle | null {
  const pairs = pairsOf(design, tied, weighing), { truth, what, place, factor } = design
  if (pairs.length === 0) return null
  return {
    what, pairs, least: Math.min(...pairs.map(({ gain }) => gain)), separates: pairs.every(one => one.gain >= needed(one.truth, one.rival)), sentence: words(design, pairs),
    changes: place === null ? null : { explanation: truth.explanation, parameter: placeName(truth.found.model, place), factor },
  }
}

/**
 * For each explanation in a tie: what a weaker first stimulus would show, and the manipulation that would part it best from the others.
 * @param weighing - judged
 * @returns designs, the ones that part most first; empty where nothing is tied
 */
export function settleTie(weighing: Weighing): WeighSettle[] {
  const { judgement } = weighing, tied = judgement.ranked.filter(({ explanation }) => judgement.within.includes(explanation)).slice(0, MOST_TIED)
  if (judgement.kind === 'prefers' || judgement.rule === 'none-acceptable' || tied.length < 2) return []
  const found = tied.flatMap((truth) => {
    const all = designsFor(truth, weighing).flatMap(design => settled(design, tied, weighing) ?? []), best = all.filter(({ what }) => what === 'manipulation').sort((a, b) => b.least - a.least)[0]
    return [...all.filter(({ what }) => what === 'short-step'), ...best ? [best] : []]
  })
  return found.sort((a, b) => b.least - a.least)
}
