/** Every ratio that an outcome reports, as functions of column sums, so that one resampling gives all their intervals. */
import type { Scenario } from '../schemas/scenario'
import { depletionPart, stillParts, type StillParts } from '../kinetics/decomposition'
import type { OutcomeFrame } from './frame'
import { resampledIntervals, type Bounds } from './intervals'
import { sumOf, type Tallies } from './tallies'

export interface Estimate extends Bounds { value: number | null }
export interface Estimates {
  /** Per kind of site: τ [s], walk over closed form [1], what depletion adds [s]. */
  tau: Estimate[]
  ratio: Estimate[]
  depletion: Estimate[]
  /** Over all sites: exposure per attachment [s], walk over closed form [1], share-weighted depletion [s]. */
  allTau: Estimate
  allRatio: Estimate
  allDepletion: Estimate
}

const COLUMNS = 3 // events, exposure, driven exposure; per kind of site

/**
 * Estimates with 95 % intervals. τ of a kind of site is the exposure of its empty sites over their attachments: the maximum-likelihood time constant under an exponential law, right under censoring.
 * Every empty spell counts, those after a release or a detachment too: they are more data under the same law.
 * @param scenario - with defaults filled in
 * @param frame - the same, compiled
 * @param tallies - of the run [count, steps]
 * @param seedWords - the run's own, low and high
 * @returns estimates; null where no attachment, a single replicate or decline leaves one undefined
 */
export function estimatesOf(scenario: Scenario, frame: OutcomeFrame, tallies: Tallies, seedWords: readonly [number, number]): Estimates {
  const kinds = frame.sitesPerClass.length
  const parts = scenario.sites.map(site => stillParts(scenario, site.attachProbability))
  const weights = frame.sitesPerClass.map(sites => sites / frame.siteCount)
  const statistics = statisticsOf(tallies.chances, frame.decline === null ? parts : null, weights, frame.stepS)
  const columns = [tallies.events, tallies.exposureSteps, tallies.drivenSteps]
  const whole = new Float64Array(COLUMNS * kinds), values = new Float64Array(3 * kinds + 3)
  for (let column = 0; column < whole.length; column++) whole[column] = sumOf(columns[column % COLUMNS]![Math.floor(column / COLUMNS)])
  statistics(whole, values)
  const bounds = resampledIntervals({
    replicates: tallies.replicates, width: whole.length, count: values.length, statistics, seedLow: seedWords[0], seedHigh: seedWords[1],
    read: (replicate, column) => columns[column % COLUMNS]![Math.floor(column / COLUMNS)]![replicate]!,
  })
  const estimate = (k: number): Estimate => Number.isFinite(values[k]) ? { value: values[k]!, ...bounds[k]! } : { value: null, low: null, high: null }
  const perKind = (first: number) => Array.from({ length: kinds }, (_, j) => estimate(first + j))
  return {
    tau: perKind(0), ratio: perKind(kinds), depletion: perKind(2 * kinds),
    allTau: estimate(3 * kinds), allRatio: estimate(3 * kinds + 1), allDepletion: estimate(3 * kinds + 2),
  }
}

/** Order of the statistics: τ of each kind, ratio of each, depletion of each, then the three of all sites. */
function statisticsOf(chances: number[], parts: StillParts[] | null, weights: number[], stepS: number) {
  const kinds = chances.length
  return (sums: Float64Array, out: Float64Array): void => {
    let events = 0, exposure = 0, expected = 0, depletion = parts ? 0 : NaN
    for (let j = 0; j < kinds; j++) {
      const seen = sums[COLUMNS * j]!, empty = sums[COLUMNS * j + 1]!, hoped = chances[j]! * sums[COLUMNS * j + 2]!
      const tau = empty * stepS / seen
      const added = parts && Number.isFinite(tau) ? depletionPart(parts[j]!, tau) ?? NaN : NaN
      out[j] = tau
      out[kinds + j] = hoped / seen
      out[2 * kinds + j] = added
      events += seen
      exposure += empty
      expected += hoped
      if (weights[j]! > 0) depletion += weights[j]! * added
    }
    out[3 * kinds] = exposure * stepS / events
    out[3 * kinds + 1] = expected / events
    out[3 * kinds + 2] = depletion
  }
}
