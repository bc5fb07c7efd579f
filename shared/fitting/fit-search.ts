/** From starts to the best fit: many short tries, a few to the end, the best one to its last digits. */
import { log } from './elementary'
import { curveProblem, isLogarithmic, placesOf, type Slot } from './curve-problem'
import type { FitDesign } from './fit-design'
import { fitLeastSquares, SEARCH, type LeastSquaresFit, type LeastSquaresOptions, type LeastSquaresProblem } from './least-squares'
import { PLACE, PLACES } from './recovery-model'

/** Last steps from a minimum that is already found. */
const POLISH: LeastSquaresOptions = { damping: 1e-4, iterations: 200, changeTolerance: 1e-15, changeFloor: 0, stepTolerance: 1e-13, confirmations: 2 }
/** Iterations of a first try. */
const FIRST_ITERATIONS = 12
/** How many of the short tries go to the end. */
const KEPT = 6

/** A start by meaning: share, and time constants over the longest interval. */
export interface StartShape { share: number, tauFast: number, tauSlow: number }
/** Spread over the ways in which a curve can bend; each is tried from every data set. */
const SHAPES: Record<FitDesign['model'], readonly StartShape[]> = {
  one: [0.003, 0.01, 0.04, 0.2, 1].map(tau => ({ share: 1, tauFast: tau, tauSlow: 1 })),
  two: [[0.6, 0.016, 0.39], [0.13, 0.00065, 0.05], [0.4, 0.0065, 0.1], [0.5, 0.05, 1], [0.8, 0.03, 0.4], [0.3, 0.0025, 0.065], [0.5, 0.1, 0.4]]
    .map(([share, tauFast, tauSlow]) => ({ share: share!, tauFast: tauFast!, tauSlow: tauSlow! })),
}
/** For resampling, where the minimum is known nearly. */
export const FEW_SHAPES: readonly StartShape[] = [SHAPES.two[0]!]

/** Depletion to start from: what the first point of its curves lacks. */
function lacking({ curves, slots }: FitDesign, slot: Slot): number {
  const plateau = slots.some(one => one.place === PLACE.plateau) ? Math.max(...slot.curves.map(curve => curves[curve]!.ratios.at(-1)!)) : 1
  const lacks = slot.curves.map(curve => plateau - curves[curve]!.ratios[0]!)
  return lacks.reduce((sum, one) => sum + one, 0) / lacks.length
}

/**
 * Free parameters of a start.
 * @param design - curves and slots
 * @param shape - shares [1] and time constants over the longest interval [1]
 * @returns one value per slot [1, ln s]
 */
export function startOf(design: FitDesign, shape: StartShape): Float64Array {
  const last = design.spanS[1]
  return Float64Array.from(design.slots, (slot) => {
    if (slot.place === PLACE.plateau) return Math.max(...slot.curves.map(curve => design.curves[curve]!.ratios.at(-1)!))
    if (slot.place === PLACE.depletion) return lacking(design, slot)
    if (slot.place === PLACE.fastShare) return shape.share
    return log(last * (slot.place === PLACE.logTauFast ? shape.tauFast : shape.tauSlow))
  })
}

/**
 * The one-exponential fit written as two: both time constants near it, so that two never fit worse; a phase before the first interval; one after the last.
 * @param two - design with two exponentials
 * @param one - design with one, of the same conditions
 * @param x - its fit [1, ln s]
 * @returns starts for the two [1, ln s]
 */
export function startsFromOne(two: FitDesign, one: FitDesign, x: Float64Array): Float64Array[] {
  const places = one.curves.map((curve) => {
    const at = new Float64Array(PLACES)
    placesOf(curve, x, at)
    return at
  })
  const [early, late] = [log(two.spanS[0] / 3), log(two.spanS[1] * 8)]
  const splits: ((tau: number) => { share: number, fast: number, slow: number, more: number })[] = [
    tau => ({ share: 0.5, fast: tau - log(1.5), slow: tau + log(1.5), more: 1 }),
    tau => ({ share: 0.9, fast: tau - log(4), slow: tau + log(4), more: 1 }),
    tau => ({ share: 0.4, fast: early, slow: tau, more: 1 / 0.6 }),
    tau => ({ share: 0.95, fast: tau, slow: late, more: 1 }),
  ]
  return splits.map(split => Float64Array.from(two.slots, ({ place, curves }) => {
    const at = places[curves[0]!]!, { share, fast, slow, more } = split(at[PLACE.logTauFast]!)
    if (place === PLACE.fastShare) return share
    if (place === PLACE.depletion) return more * at[place]!
    return place === PLACE.logTauFast ? fast : place === PLACE.logTauSlow ? slow : at[place]!
  }))
}

/**
 * The best of several starts, each tried for a few iterations, the best ones to the end.
 * @param problem - with bounds
 * @param starts - free parameters of each [1, ln s]
 * @param kept - how many go to the end [1]
 * @param options - of the engine
 * @returns the fit with the lowest χ²
 */
export function bestOf(problem: LeastSquaresProblem, starts: readonly ArrayLike<number>[], kept = KEPT, options = SEARCH): LeastSquaresFit {
  const tries = starts.map(start => fitLeastSquares(problem, start, { ...options, iterations: FIRST_ITERATIONS })).sort((a, b) => a.chi2 - b.chi2).slice(0, kept)
  return tries.map(one => one.converged ? one : fitLeastSquares(problem, one.parameters, options)).reduce((best, one) => one.chi2 < best.chi2 ? one : best)
}

export interface FoundFit extends LeastSquaresFit { problem: LeastSquaresProblem }

/**
 * The best fit of a design.
 * @param design - curves and free parameters
 * @param more - further starts, as from fits of its parts [1, ln s]
 * @returns the fit at the lowest χ² found, exponentials in order
 */
export function searchFit(design: FitDesign, more: readonly ArrayLike<number>[] = []): FoundFit {
  const problem = curveProblem(design.curves, design.slots)
  const best = bestOf(problem, [...SHAPES[design.model].map(shape => startOf(design, shape)), ...more])
  const polished = polish(problem, inOrder(design, best.parameters), best.converged), sorted = inOrder(design, polished.parameters)
  // Time constants that all but coincide may pass each other in the last steps.
  const passed = sorted.some((value, j) => value !== polished.parameters[j])
  return { ...(passed ? polish(problem, sorted, polished.converged) : polished), problem }
}

/**
 * Goes to the last digits; never ends above where it started.
 * @param problem - with bounds
 * @param at - a minimum, nearly [1, ln s]
 * @param converged - whether the search had settled there
 * @returns the fit
 */
export function polish(problem: LeastSquaresProblem, at: Float64Array, converged: boolean): LeastSquaresFit {
  const fit = fitLeastSquares(problem, at, POLISH)
  return { ...fit, converged: fit.converged || converged }
}

/** Slots of two exponentials that trade places together: curves linked by any of them. */
function linkedCurves({ curves, slots }: FitDesign): number[][] {
  const group = curves.map((_, curve) => curve)
  for (const slot of slots.filter(one => one.place === PLACE.fastShare || isLogarithmic(one))) {
    const [first, ...others] = slot.curves
    for (const other of others) {
      const [from, to] = [group[other]!, group[first!]!]
      group.forEach((value, curve) => {
        if (value === from) group[curve] = to
      })
    }
  }
  return [...new Set(group)].map(name => group.flatMap((value, curve) => value === name ? [curve] : []))
}

/**
 * Sorts two exponentials by τ. Curves that share parameters are sorted together, by the first of them, and only where both time constants are shared alike.
 * @param design - curves and slots
 * @param parameters - free parameters [1, ln s]
 * @returns the same fit with fast before slow [1, ln s]
 */
export function inOrder(design: FitDesign, parameters: Float64Array): Float64Array {
  const sorted = Float64Array.from(parameters)
  if (design.model === 'one') return sorted
  for (const linked of linkedCurves(design)) {
    const slotsAt = (place: number) => linked.map(curve => design.curves[curve]!.slots[place]!)
    const fast = slotsAt(PLACE.logTauFast), slow = slotsAt(PLACE.logTauSlow)
    const pairs = new Map(fast.map((slot, i) => [slot, slow[i]!]))
    const alike = fast.every((slot, i) => pairs.get(slot) === slow[i]!) && new Set(slow).size === pairs.size
    if (!alike || sorted[fast[0]!]! <= sorted[slow[0]!]!) continue
    for (const [one, other] of pairs) [sorted[one], sorted[other]] = [sorted[other]!, sorted[one]!]
    for (const share of new Set(slotsAt(PLACE.fastShare))) sorted[share] = 1 - sorted[share]!
  }
  return sorted
}
