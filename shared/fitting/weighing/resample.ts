/** Cells drawn again with replacement: how often the same explanation leads, and how far its values move. */
import { exp } from '../elementary'
import type { WeighResample } from '../../schemas/weigh-up'
import { studentQuantile975 } from '../../walk/normal'
import { Stream, seedWords, stateOf } from '../../walk/streams'
import { cellRows, whitening, type CellDirections, type CellRow } from '../cell-covariance'
import { EXPLANATION_NAMES, SPOKEN_AS_MANY, type Explanation } from './explanations'
import type { WeighCondition, WeighData } from './prepare'
import { changesKey, searchAll, type Found } from './search'
import { judge } from './verdict'
import type { WeighInput, Weighing, WeighProgress } from './weigh-up'

interface Source { condition: WeighCondition, rows: CellRow[], directions: CellDirections | null }

const pick = (values: Float64Array, places: readonly number[]) => Float64Array.from(places, place => values[place]!)

/** Means of drawn cells; an interval at which none of them was measured is left out. */
function drawn({ condition, rows, directions }: Source, stream: Stream, weighing: Weighing): WeighCondition {
  const points = condition.times.length, sums = new Float64Array(points), squares = new Float64Array(points), numbers = new Float64Array(points)
  for (let k = 0; k < rows.length; k++) {
    const { at, values } = rows[stream.below(rows.length)]!
    at.forEach((i, j) => {
      sums[i]! += values[j]!
      squares[i]! += values[j]! ** 2
      numbers[i]! += 1
    })
  }
  const kept = Array.from(numbers, (_, i) => i).filter(i => numbers[i]! > 0), n = pick(numbers, kept), variance = weighing.cells?.variance
  const sigma = variance?.sigma ?? weighing.plain.noise.pooledSd ?? 1, error = n.map(count => sigma / Math.sqrt(count)), ratio = Float64Array.from(kept, i => sums[i]! / numbers[i]!)
  const sd = Float64Array.from(kept, i => numbers[i]! > 1 ? Math.sqrt(Math.max(0, squares[i]! - sums[i]! ** 2 / numbers[i]!) / (numbers[i]! - 1)) : NaN)
  const own = directions && { timesS: pick(directions.timesS, kept), byRate: pick(directions.byRate, kept), byDepletion: pick(directions.byDepletion, kept) }
  return {
    ...condition, timesS: pick(condition.timesS, kept), times: pick(condition.times, kept), ratio, error, n, sd,
    whiten: own && variance ? whitening(error, own, variance.kappa, variance.delta, rows.length) : null,
  }
}

class Tally {
  done = 0
  sameExplanation = 0
  sameChanges = 0
  private readonly best = new Map<Explanation, number>()
  private readonly values: number[][] = []

  constructor(private readonly lead: Found, private readonly leader: Explanation, private readonly weighing: Weighing) {}

  add(found: ReadonlyMap<Explanation, readonly Found[]>, data: WeighData): void {
    const { ranked } = judge(found, data, { typed: this.weighing.typed, cells: this.weighing.cells !== null }), first = ranked[0]!
    this.done++
    this.best.set(first.explanation, (this.best.get(first.explanation) ?? 0) + 1)
    if (first.explanation === this.leader) this.sameExplanation++
    if (first.explanation === this.leader && changesKey(first.found.changes) === changesKey(this.lead.changes)) this.sameChanges++
    const same = found.get(this.leader)?.find(one => changesKey(one.changes) === changesKey(this.lead.changes))
    if (same) this.values.push([...same.parameters])
  }

  /** Value ± SD·√(n/(n − 1))·t in the scale of the fit, kept inside the bounds. */
  parameters(cells: number, dof: number): WeighResample['parameters'] {
    return this.lead.layout.slots.map((slot, i) => {
      const column = this.values.map(one => one[i]!), n = column.length
      if (n < 20) return null
      const mean = column.reduce((sum, one) => sum + one, 0) / n, sd = Math.sqrt(column.reduce((sum, one) => sum + (one - mean) ** 2, 0) / (n - 1))
      const half = sd * Math.sqrt(cells / (cells - 1)) * studentQuantile975(dof), parameter = this.lead.model.parameters[slot.place], { lower, upper } = this.lead.layout
      const natural = (value: number) => {
        const own = Math.min(upper[i]!, Math.max(lower[i]!, value)), plain = parameter?.log ? exp(own) : own
        return parameter?.unit === '1/s' ? plain / this.weighing.plain.unitS : parameter?.unit === 's' ? plain * this.weighing.plain.unitS : plain
      }
      return { low: natural(this.lead.parameters[i]! - half), high: natural(this.lead.parameters[i]! + half) }
    })
  }

  leaders(): WeighResample['best'] {
    return [...this.best].map(([explanation, count]) => ({ explanation, count })).sort((a, b) => b.count - a.count)
  }
}

/**
 * Weighs again on cells drawn with replacement within each condition; scatter and covariance stay those of the whole.
 * @param weighing - judged
 * @param input - with the cells, the number of resamples and their seed
 * @returns shares and cross-checked intervals; null where some condition has no cells. Yields after each resample.
 */
export function* resampleCells(weighing: Weighing, input: WeighInput): Generator<WeighProgress, WeighResample | null> {
  const { plain, data, typed, explanations, found, judgement } = weighing, { resamples, seed } = input.settings
  const sources = plain.conditions.map((condition, c): Source => ({
    condition, directions: weighing.cells?.directions[c] ?? null, rows: cellRows(input.conditions.find(one => one.condition === condition.condition)!.cells, condition.timesS),
  }))
  if (sources.some(({ rows }) => rows.length < 3)) return null
  const lead = judgement.ranked[0]!, tally = new Tally(lead.found, lead.explanation, weighing), [low, high] = seedWords(seed)
  for (let b = 0; b < resamples && !input.stopResampling?.(); b++) {
    const stream = new Stream(stateOf(low, high, b)), conditions = sources.map(source => drawn(source, stream, weighing))
    const again: WeighData = { ...data, conditions, points: conditions.reduce((sum, one) => sum + one.times.length, 0) }
    const steps = searchAll(again, { typed, warm: found }, explanations)
    let step = steps.next()
    while (!step.done) step = steps.next()
    tally.add(step.value, again)
    yield { stage: 'resample', explanation: null, done: b + 1, total: resamples }
  }
  const cells = sources.reduce((sum, { rows }) => sum + rows.length, 0), dof = cells - sources.length
  return {
    asked: resamples, done: tally.done, seed, partial: tally.done < resamples, sameExplanation: tally.sameExplanation, sameChanges: tally.sameChanges, best: tally.leaders(), parameters: tally.parameters(cells / sources.length, dof),
    sentence: `In ${tally.sameExplanation} of ${tally.done} resamples of the cells ${EXPLANATION_NAMES[lead.explanation]} ${SPOKEN_AS_MANY.has(lead.explanation) ? 'lead' : 'leads'}${lead.found.changes.size > 0 ? `, in ${tally.sameChanges} with the same changes` : ''}. This share is information; it decides nothing.`,
  }
}
