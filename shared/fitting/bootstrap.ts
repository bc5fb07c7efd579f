/**
 * One exponential against two: parametric bootstrap under the one.
 * The likelihood ratio does not follow χ² here: the smaller model lies on the boundary of the richer, and one time constant has no meaning there (Davies 1977, Biometrika 64:247).
 */
import { log } from './elementary'
import { seedWords, stateOf, Stream } from '../walk/streams'
import { curveProblem, placesOf, type Curve } from './curve-problem'
import { normalDeviates } from './deviates'
import type { SearchedFit } from './fit'
import { bestOf, FEW_SHAPES, startOf, startsFromOne } from './fit-search'
import { fitLeastSquares, SEARCH } from './least-squares'
import { PLACES, recoveryAt } from './recovery-model'

export const BOOTSTRAP_RESAMPLES = 999
export const BOOTSTRAP_SEED = 'one or two'
/** A statistic is wanted to a few thousandths; valleys of two exponentials under one are long and flat. */
const COARSE = { ...SEARCH, changeTolerance: 1e-4, iterations: 60 }
/** Number of the stream that fits draw from; no replicate of a walk has it. */
const STREAM = 0xFFFFFFFE

export interface BootstrapOptions {
  resamples?: number
  seed?: string
  /** Called every 50 resamples with those done [count]; returning false ends early. */
  progress?: (done: number) => boolean
}

export interface BootstrapResult {
  /** χ²₁ − χ²₂, without weights n·ln(RSS₁/RSS₂) [1]. */
  statistic: number
  /** (1 + resamples that reach the statistic) / (B + 1). */
  p: number
  resamples: number
  seed: string
  /** 95 % point of the statistic under one exponential [1]. */
  critical95: number
}

const ratioOf = (known: boolean, points: number, one: number, two: number): number =>
  known ? Math.max(0, one - two) : points * log(Math.max(1, one / Math.max(two, 1e-300)))

/** New ratios about a curve: independent errors, or errors that the whitening factor would make independent again (W·e = z, solved from the first row down). */
function draw({ ratios, weights, whitening }: Curve, fitted: Float64Array, deviates: Float64Array, scatter: number): void {
  const n = ratios.length
  for (let i = 0; i < n; i++) {
    let error = scatter * deviates[i]!
    for (let k = 0; whitening && k < i; k++) error -= whitening[i * n + k]! * (ratios[k]! - fitted[k]!)
    ratios[i] = fitted[i]! + error / (whitening ? whitening[i * n + i]! : weights[i]!)
  }
}

/**
 * p of one exponential against two: new ratios are drawn about the one-exponential curve with the errors of the points (without weights: with the scatter about it), and both models are fitted to each draw.
 * @param one - search with one exponential; `two` must have the same conditions and options
 * @param two - search with two exponentials
 * @param options - resamples, seed, progress
 * @returns statistic and p; null where progress ended it
 */
export function bootstrapOneAgainstTwo(one: SearchedFit, two: SearchedFit, { resamples = BOOTSTRAP_RESAMPLES, seed = BOOTSTRAP_SEED, progress }: BootstrapOptions = {}): BootstrapResult | null {
  const { curves, weighted } = one.design, known = weighted.weights !== 'none', x = one.found.parameters
  const points = one.found.residuals.length, dof = points - one.design.slots.length
  const statistic = ratioOf(known, points, one.found.chi2, two.found.chi2)
  const drawn = curves.map(curve => ({ ...curve, ratios: Float64Array.from(curve.ratios) }))
  const problemOne = curveProblem(drawn, one.design.slots), problemTwo = curveProblem(two.design.curves.map((curve, i) => ({ ...curve, ratios: drawn[i]!.ratios })), two.design.slots)
  const scatter = known ? 1 : Math.sqrt(one.found.chi2 / Math.max(1, dof))
  const fitted = curves.map((curve) => {
    const at = new Float64Array(PLACES)
    placesOf(curve, x, at)
    return Float64Array.from(curve.timesS, time => recoveryAt(at, time))
  })
  const [low, high] = seedWords(seed), stream = new Stream(stateOf(low, high, STREAM)), deviates = new Float64Array(points), found = new Float64Array(resamples)
  const shapes = FEW_SHAPES.map(shape => startOf(two.design, shape))
  for (let done = 0; done < resamples; done++) {
    if (progress && done % 50 === 0 && !progress(done)) return null
    normalDeviates(stream, deviates)
    let row = 0
    drawn.forEach((curve, i) => {
      draw(curve, fitted[i]!, deviates.subarray(row, row += curve.ratios.length), scatter)
    })
    const fitOne = fitLeastSquares(problemOne, x)
    const fitTwo = bestOf(problemTwo, [...startsFromOne(two.design, one.design, fitOne.parameters), ...shapes], 2, COARSE)
    found[done] = ratioOf(known, points, fitOne.chi2, fitTwo.chi2)
  }
  const reached = found.reduce((sum, value) => sum + (value >= statistic ? 1 : 0), 0)
  found.sort()
  return { statistic, p: (1 + reached) / (resamples + 1), resamples, seed, critical95: found[Math.min(resamples - 1, Math.ceil(0.95 * resamples) - 1)]! }
}
