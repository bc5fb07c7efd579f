/** The staged search of a weigh-up: untouched conditions, one manipulation at a time, then every combination that can still win. */
import { log } from '../elementary'
import { fitLeastSquares, SEARCH, type LeastSquaresOptions } from '../least-squares'
import { boundsOf, MODELS, type Explanation, type ExplanationModel } from './explanations'
import { JointProblem, layOut, type Changes, type Layout, type Slot, type TypedDepletion } from './joint-problem'
import type { WeighCondition, WeighData } from './prepare'

export interface Found {
  model: ExplanationModel
  changes: Changes
  layout: Layout
  /** In the scale of the fit: logarithms of rates and stores, times in units of the search. */
  parameters: Float64Array
  chi2: number
}

export interface SearchSettings {
  typed: TypedDepletion
  /** Earlier results to start from; fixed guesses are then left out of the stage of single manipulations. */
  warm?: ReadonlyMap<string, readonly Found[]>
}

/** Combinations this far behind, in units of the scatter, can neither win nor tie. */
export const PRUNE_BEHIND = 12
const FIRST_LOOK: LeastSquaresOptions = { ...SEARCH, iterations: 12 }
const TO_THE_END = 4
const KEPT_MINIMA = 3
const FACTORS = [0.02, 0.05, 0.1, 0.2, 0.35, 0.6, 1, 1.7, 3, 6, 12, 30].map(Math.log)
const SHARES = [0.02, 0.05, 0.1, 0.2, 0.35, 0.5, 0.65, 0.8, 0.95]
const VARIANCES = [0.05, 0.25, 0.5, 1, 2, 4, 8]

const slotKey = ({ place, manipulation, protocol }: Slot) => `${place}|${manipulation ?? ''}|${protocol ?? ''}`
/** One text for a set of changes, whatever their order. */
export const changesKey = (changes: Changes) => JSON.stringify([...changes].sort(([a], [b]) => a < b ? -1 : 1))

/** Search of one explanation on one set of data. */
export class ExplanationSearch {
  private readonly shape: number
  private readonly untouched: WeighCondition[]
  private readonly firstDepletion = new Map<string, number>()

  constructor(readonly model: ExplanationModel, private readonly data: WeighData, private readonly settings: SearchSettings) {
    this.shape = model.parameters.length
    this.untouched = data.conditions.filter(one => one.manipulation === data.untouched)
    for (const one of [...data.conditions].reverse()) this.firstDepletion.set(one.protocol, Math.min(1, Math.max(0.05, 1 - one.ratio[0]!)))
  }

  private problem(conditions: readonly WeighCondition[], changes: Changes): JointProblem {
    return new JointProblem(this.model, conditions, layOut(this.model, conditions, changes, this.data, this.settings.typed), this.settings.typed)
  }

  /** The fixed guesses, in the scale of the fit; depletions from the first point of each protocol. */
  private guesses(): Map<string, number>[] {
    return this.model.starts.map(start => new Map(start.map((value, place) => {
      const parameter = this.model.parameters[place]!, [lower, upper] = boundsOf(parameter, this.data.first, this.data.last)
      return [slotKey({ place, manipulation: null, protocol: null }), Math.min(upper, Math.max(lower, parameter.log ? log(value) : value))]
    })))
  }

  private valuesOf({ layout, parameters }: Found): Map<string, number> {
    return new Map(layout.slots.map((slot, i) => [slotKey(slot), parameters[i]!]))
  }

  /** A start for a layout from values by slot: what is changed starts where it is not changed, a depletion from its first point. */
  private startFor(layout: Layout, values: ReadonlyMap<string, number>): Float64Array {
    return Float64Array.from(layout.slots, slot => values.get(slotKey(slot)) ?? values.get(slotKey({ ...slot, manipulation: null }))
      ?? (slot.place === this.shape ? this.firstDepletion.get(slot.protocol!)! : 0))
  }

  private fit(problem: JointProblem, changes: Changes, start: Float64Array, options: LeastSquaresOptions): Found | null {
    try {
      const { parameters, chi2 } = fitLeastSquares(problem, start, options)
      return { model: this.model, changes, layout: problem.layout, parameters, chi2 }
    } catch (thrown) {
      // A start at which the curve is not finite is no start; the others stand.
      if (thrown instanceof RangeError) return null
      throw thrown
    }
  }

  /** A short fit from every start, the best ones to the end. */
  private bestOf(problem: JointProblem, changes: Changes, starts: Float64Array[]): Found[] {
    const looked = starts.flatMap(start => this.fit(problem, changes, start, FIRST_LOOK) ?? []).sort((a, b) => a.chi2 - b.chi2)
    const distinctLooks = looked.filter((one, i) => !looked.slice(0, i).some(other => sameMinimum(one, other)))
    return distinctLooks.slice(0, TO_THE_END).flatMap(one => this.fit(problem, changes, one.parameters, SEARCH) ?? []).sort((a, b) => a.chi2 - b.chi2)
  }

  /** Rates that may change places are put in order, changes with them. */
  private canonical(found: Found, conditions: readonly WeighCondition[]): Found {
    const { exchange } = this.model
    if (!exchange) return found
    const { first, second, share, larger } = exchange, { parameters, layout } = found
    const ordered = larger === 'first' ? parameters[first]! >= parameters[second]! : parameters[second]! >= parameters[first]!
    if (ordered) return found
    const swapped = (place: number) => place === first ? second : place === second ? first : place
    const changes = new Map([...found.changes].map(([name, place]) => [name, swapped(place)]))
    const values = new Map(layout.slots.map((slot, i) => [slotKey({ ...slot, place: swapped(slot.place) }), slot.place === share ? 1 - parameters[i]! : parameters[i]!]))
    const next = layOut(this.model, conditions, changes, this.data, this.settings.typed)
    const moved = this.startFor(next, values), outside = moved.some((value, i) => value < next.lower[i]! || value > next.upper[i]!)
    return outside ? found : { ...found, changes, layout: next, parameters: moved }
  }

  private warmStarts(): Map<string, number>[] {
    return (this.settings.warm?.get(this.model.id) ?? []).map(found => this.valuesOf(found))
  }

  /** Minima of the untouched conditions, best first. */
  untouchedMinima(): Found[] {
    const none: Changes = new Map(), problem = this.problem(this.untouched, none)
    const starts = [...this.warmStarts(), ...this.guesses()].map(values => this.startFor(problem.layout, values))
    const kept: Found[] = []
    for (const found of this.bestOf(problem, none, starts).map(one => this.canonical(one, this.untouched))) {
      if (kept.length < KEPT_MINIMA && !kept.some(other => sameMinimum(found, other))) kept.push(found)
    }
    return kept
  }

  /** Whether a change of depletion says anything: some protocol of the manipulation, not typed, is also used without it. */
  private depletionCanChange(manipulation: string): boolean {
    const { conditions } = this.data
    return conditions.some(one => one.manipulation === manipulation && this.settings.typed[one.protocol] === undefined && conditions.some(other => other.protocol === one.protocol && other.manipulation !== manipulation))
  }

  placesOf(manipulation: string): number[] {
    return Array.from({ length: this.shape + 1 }, (_, place) => place).filter(place => place < this.shape ? place !== this.model.perProtocol : this.depletionCanChange(manipulation))
  }

  /** The start with the changed parameter put where a scan finds χ² least. */
  private scanned(problem: JointProblem, start: Float64Array, manipulation: string, place: number): Float64Array {
    const { slots, lower, upper } = problem.layout, scratch = new Float64Array(problem.points), changed = slots.flatMap((slot, i) => slot.place === place && slot.manipulation === manipulation ? [i] : [])
    const parameter = this.model.parameters[place], tried = Float64Array.from(start)
    let best = Float64Array.from(start), least = Infinity
    for (const value of parameter?.log ? FACTORS : parameter && parameter.upper > 1 ? VARIANCES : SHARES) {
      for (const i of changed) tried[i] = Math.min(upper[i]!, Math.max(lower[i]!, parameter?.log ? start[i]! + value : value))
      const chi2 = problem.chi2At(tried, scratch)
      if (!(chi2 < least)) continue
      least = chi2
      best = Float64Array.from(tried)
    }
    return best
  }

  /** Best fits of the untouched conditions with one manipulation that changes one parameter. */
  single(manipulation: string, place: number, minima: readonly Found[]): Found[] {
    const conditions = [...this.untouched, ...this.data.conditions.filter(one => one.manipulation === manipulation)], changes: Changes = new Map([[manipulation, place]])
    const problem = this.problem(conditions, changes), warm = this.warmStarts().filter(values => [...values.keys()].some(key => key.startsWith(`${place}|${manipulation}|`)))
    const fixed = this.settings.warm ? [] : this.guesses()
    const scans = [...minima.map(found => this.valuesOf(found)), ...fixed].map(values => this.scanned(problem, this.startFor(problem.layout, values), manipulation, place))
    return this.bestOf(problem, changes, [...warm.map(values => this.startFor(problem.layout, values)), ...scans]).map(one => this.canonical(one, conditions))
  }

  /** A candidate fitted again with one manipulation more, whatever that changes: the best of all changes. */
  extended(found: Found, manipulation: string): Found | null {
    const { conditions } = this.data
    if (!conditions.some(one => one.manipulation === manipulation)) return this.bestOf(this.problem(conditions, found.changes), found.changes, [this.startFor(this.problem(conditions, found.changes).layout, this.valuesOf(found))])[0] ?? null
    const fits = this.placesOf(manipulation).flatMap((place) => {
      const changes: Changes = new Map([...found.changes, [manipulation, place]]), problem = this.problem(conditions, changes)
      const starts = [this.valuesOf(found), ...this.guesses().slice(0, 2)].map(values => this.scanned(problem, this.startFor(problem.layout, values), manipulation, place))
      return this.bestOf(problem, changes, starts)
    })
    return fits.sort((a, b) => a.chi2 - b.chi2)[0] ?? null
  }

  /** All manipulations together, started from the single fits. */
  combined(changes: Changes, parts: readonly Found[]): Found | null {
    const { conditions } = this.data, problem = this.problem(conditions, changes), merged = new Map<string, number>()
    for (const part of parts) for (const [key, value] of this.valuesOf(part)) if (!merged.has(key)) merged.set(key, value)
    const starts = parts.map(part => this.startFor(problem.layout, new Map([...merged, ...this.valuesOf(part)])))
    for (const values of this.warmStarts()) if (problem.layout.slots.every(slot => slot.manipulation === null || values.has(slotKey(slot)))) starts.push(this.startFor(problem.layout, values))
    const [best] = this.bestOf(problem, changes, starts)
    return best ? this.canonical(best, conditions) : null
  }
}

function sameMinimum(a: Found, b: Found): boolean {
  if (Math.abs(a.chi2 - b.chi2) > 1e-3 * Math.max(1, b.chi2)) return false
  return a.parameters.every((value, i) => Math.abs(value - b.parameters[i]!) <= 0.01 * Math.max(1, Math.abs(value)))
}

/** Every choice of one entry from each list. */
function product<T>(lists: readonly (readonly T[])[]): T[][] {
  return lists.reduce<T[][]>((all, list) => all.flatMap(head => list.map(item => [...head, item])), [[]])
}

/** Fits a candidate again from where it stands. */
export function refit(found: Found, data: WeighData, typed: TypedDepletion): Found {
  const { parameters, chi2 } = fitLeastSquares(new JointProblem(found.model, data.conditions, found.layout, typed), found.parameters, SEARCH)
  return { ...found, parameters, chi2 }
}

class Best {
  private readonly byKey = new Map<string, Found>()

  add(found: Found): void {
    const key = changesKey(found.changes), held = this.byKey.get(key)
    if (!held || found.chi2 < held.chi2) this.byKey.set(key, found)
  }

  sorted(): Found[] {
    return [...this.byKey.values()].sort((a, b) => a.chi2 - b.chi2)
  }
}

/** How far χ² may stand behind the best of its explanation and still matter. */
const reach = (chi2: number, dof: number) => chi2 + PRUNE_BEHIND * Math.max(1, chi2 / Math.max(1, dof))

/**
 * Searches one explanation.
 * @param model - the explanation
 * @param data - prepared recordings
 * @param settings - typed depletions, warm starts
 * @returns candidates by what the manipulations change, best first; those out of reach of the best are left out. Yields between fits, so that a caller can report or stop.
 */
export function* searchExplanation(model: ExplanationModel, data: WeighData, settings: SearchSettings): Generator<void, Found[]> {
  const search = new ExplanationSearch(model, data, settings), minima = search.untouchedMinima()
  yield
  if (data.manipulations.length === 0 || minima.length === 0) return minima.slice(0, 1)
  const singles: Found[][] = []
  for (const manipulation of data.manipulations) {
    const best = new Best()
    for (const place of search.placesOf(manipulation)) {
      for (const found of search.single(manipulation, place, minima)) best.add(found)
      yield
    }
    singles.push(best.sorted())
  }
  const all = new Best(), bound = (parts: readonly Found[]) => Math.max(...parts.map(part => part.chi2))
  let limit = Infinity
  for (const parts of product(singles).sort((a, b) => bound(a) - bound(b))) {
    if (bound(parts) > limit) break
    const changes: Changes = new Map(parts.flatMap(part => [...part.changes]))
    const found = parts.length === 1 ? parts[0]! : search.combined(changes, parts)
    if (!found) continue
    all.add(found)
    limit = Math.min(limit, reach(found.chi2, data.points - found.parameters.length))
    yield
  }
  return all.sorted().filter(found => found.chi2 <= limit)
}

/** Searches several explanations one after another; yields the one at work. */
export function* searchAll(data: WeighData, settings: SearchSettings, explanations: readonly Explanation[]): Generator<Explanation, Map<Explanation, Found[]>> {
  const found = new Map<Explanation, Found[]>()
  for (const explanation of explanations) {
    const steps = searchExplanation(MODELS[explanation], data, settings)
    for (let step = steps.next(); ; step = steps.next()) {
      if (step.done) {
        found.set(explanation, step.value)
        break
      }
      yield explanation
    }
  }
  return found
}
