/** How the verdict stands under other depletions, unequal emptying of the two kinds of site, and other D, ρ and a. */
import type { WeighSensitivity } from '../../schemas/weigh-up'
import type { FitRefusal } from '../point-errors'
import { EXPLANATION_NAMES, UNEVEN_SITES, type Explanation } from './explanations'
import type { TypedDepletion } from './joint-problem'
import { searchAll, searchExplanation, type Found } from './search'
import { listed } from './sentences'
import { judge, type Judgement } from './verdict'
import { readyToWeigh, type WeighInput, type WeighProgress } from './weigh-up'

/** Depletions tried around the fitted or typed one, as steps [1]. */
const STEPS = [-0.1, -0.05, -0.02, 0.02, 0.05, 0.1]
type Ready = Exclude<ReturnType<typeof readyToWeigh>, FitRefusal>
type Row = WeighSensitivity['depletions'][number]

function* searched(ready: Ready, typed: TypedDepletion, progress: WeighProgress, warm?: ReadonlyMap<string, readonly Found[]>): Generator<WeighProgress, Map<Explanation, Found[]>> {
  const steps = searchAll(ready.data, warm ? { typed, warm } : { typed }, ready.explanations)
  let step = steps.next()
  for (; !step.done; step = steps.next()) yield { ...progress, explanation: step.value }
  return step.value
}

const short = ({ kind, explanation, within, margin, changes }: Judgement): Pick<Row, 'kind' | 'explanation' | 'within' | 'margin' | 'changesNamed'> => ({ kind, explanation, within, margin, changesNamed: changes.every(one => one.named) })
const sameVerdict = (a: Judgement, b: Judgement) => a.kind === b.kind && a.explanation === b.explanation && (a.kind === 'prefers' || [...a.within].sort().join() === [...b.within].sort().join())
const said = (one: Judgement) => one.explanation ? `${EXPLANATION_NAMES[one.explanation]} would be preferred` : `nothing could be told between ${listed(one.within.map(name => EXPLANATION_NAMES[name]))}`

/** The depletion that the leading candidate has for a protocol without a manipulation of it. */
function fittedDepletion(judgement: Judgement, protocol: string, typed: TypedDepletion): number | null {
  const { found } = judgement.ranked[0]!, at = found.layout.slots.findIndex(slot => slot.place === found.model.parameters.length && slot.protocol === protocol && slot.manipulation === null)
  return typed[protocol] ?? (at < 0 ? null : found.parameters[at]!)
}

/** Two kinds of site that each protocol may empty in its own proportion, in place of those emptied alike. */
function* unevenly(ready: Ready, found: ReadonlyMap<Explanation, Found[]>, base: Judgement, progress: WeighProgress): Generator<WeighProgress, WeighSensitivity['uneven']> {
  if (ready.data.protocols.length < 2 || !found.has('site-kinds')) return { judged: null, sentence: 'Within one protocol, kinds of site that are emptied unequally give the same curve with other shares: the verdict stays, and the shares are those of the sites emptied.' }
  const steps = searchExplanation(UNEVEN_SITES, ready.data, { typed: ready.typed })
  let step = steps.next()
  for (; !step.done; step = steps.next()) yield { ...progress, explanation: 'site-kinds' }
  const next = judge(new Map([...found].map(([explanation, list]) => [explanation, explanation === 'site-kinds' ? step.value as Found[] : list])), ready.data, { typed: ready.typed, cells: ready.cells !== null })
  const same = sameVerdict(next, base), gained = (found.get('site-kinds')![0]?.chi2 ?? 0) - ((step.value as Found[])[0]?.chi2 ?? 0)
  return { judged: { ...short(next), same }, sentence: `Let each protocol empty the two kinds of site in its own proportion: χ² falls by ${Math.max(0, gained).toFixed(1)}, and ${same ? 'the verdict stays' : said(next)}.` }
}

/**
 * Weighs again under other assumptions.
 * @param input - as for the weigh-up
 * @returns rows per protocol and depletion, and sentences; yields between fits
 */
export function* sensitivitySteps(input: WeighInput): Generator<WeighProgress, WeighSensitivity | FitRefusal> {
  const ready = readyToWeigh(input)
  if ('refused' in ready) return ready
  const { data, typed, cells } = ready, settings = (own: TypedDepletion) => ({ typed: own, cells: cells !== null }), total = data.protocols.length * STEPS.length + 2
  const found = yield* searched(ready, typed, { stage: 'search', explanation: null, done: 0, total }), base = judge(found, data, settings(typed)), depletions: Row[] = []
  for (const protocol of data.protocols) {
    const centre = fittedDepletion(base, protocol, typed)
    if (centre === null) continue
    const tried = [...new Set(STEPS.map(step => Math.round(100 * Math.min(1, Math.max(0.05, centre + step))) / 100))]
    for (const value of tried) {
      const own = { ...typed, [protocol]: value }, again = yield* searched(ready, own, { stage: 'search', explanation: null, done: depletions.length + 1, total }, found)
      const judged = judge(again, data, settings(own))
      depletions.push({ protocol, value, ...short(judged), acceptable: judged.ranked[0]!.acceptable, same: sameVerdict(judged, base) })
    }
  }
  const uneven = yield* unevenly(ready, found, base, { stage: 'search', explanation: null, done: total - 1, total }), moved = depletions.filter(one => !one.same && one.acceptable), unfit = depletions.filter(one => !one.acceptable)
  const parts = [moved.length === 0 ? 'No depletion tried that still fits changes the verdict.' : `The verdict changes at ${listed(moved.map(one => `${one.value} (${one.protocol})`))}.`, ...unfit.length > 0 ? [`At ${listed(unfit.map(one => `${one.value} (${one.protocol})`))} no explanation fits acceptably.`] : []]
  return { depletions, uneven, sentence: parts.join(' '), rescale: 'Another D, ρ or a changes no curve: rates are fitted, and s = 1/(τ·D·ρ·a) scales with them. The verdict does not depend on them.' }
}
