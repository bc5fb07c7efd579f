/** What slows refill, in three parts that add up to τ: waiting for a hit, hits that fail, and a neighbourhood that empties. */
import type { Scenario } from '../schemas/scenario'
import { hitRates } from './rates'

export interface StillParts {
  /** Mean wait of an empty site for a hit, at rest; null when nothing moves [s]. */
  collisionS: number | null
  /** Further wait because hits fail to attach; null when none attaches [s]. */
  failedHitsS: number | null
  /** Mean attachment probability of a hit, Σ mᵢρᵢ·p·fᵢ / Σ mᵢρᵢ [1]. */
  meanProbability: number
}

/**
 * The two parts that need no walk: collision = 1/(a·Σ D·mᵢ·ρᵢ) and failed hits = collision·(1/s − 1), s the mean over hits of p·f. Their sum is the closed form's τ.
 * @param scenario - medium and kinds of vesicle, defaults filled in
 * @param attachProbability - of the kind of site in question [1]
 * @returns both parts [s] and the mean probability [1]
 */
export function stillParts(scenario: Pick<Scenario, 'medium' | 'vesicles'>, attachProbability: number): StillParts {
  const hits = hitRates(scenario)
  const all = hits.reduce((sum, rate) => sum + rate, 0)
  if (!(all > 0)) return { collisionS: null, failedHitsS: null, meanProbability: 0 }
  const meanProbability = hits.reduce((sum, rate, i) => sum + rate * attachProbability * scenario.vesicles[i]!.attachFactor, 0) / all
  const collisionS = 1 / all
  return { collisionS, failedHitsS: meanProbability > 0 ? collisionS * (1 / meanProbability - 1) : null, meanProbability }
}

/**
 * The part that only a walk tells: τ of the walk less collision and failed hits. Negative under exclusion, where arrivals are more regular.
 * @param parts - from `stillParts`
 * @param walkTauS - τ found by the walk, or one end of its interval [s]
 * @returns what depletion adds; null when the other two are not defined [s]
 */
export function depletionPart(parts: StillParts, walkTauS: number): number | null {
  if (parts.collisionS === null || parts.failedHitsS === null) return null
  return walkTauS - parts.collisionS - parts.failedHitsS
}
