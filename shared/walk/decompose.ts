/** The three parts of τ for the outcome document: per kind of site and share-weighted over the ribbon. */
import type { Scenario } from '../schemas/scenario'
import type { OutcomeClass } from '../schemas/outcome'
import { stillParts } from '../kinetics/decomposition'
import type { OutcomeFrame } from './frame'
import type { Estimate } from './statistics'

type Decomposition = OutcomeClass['decomposition']

/**
 * Collision, failed hits and depletion. They add up to the walk's τ where all three exist.
 * @param scenario - with defaults filled in
 * @param frame - the same, compiled
 * @param depletion - what the walk adds, per kind of site and share-weighted [s]
 * @returns the parts per kind of site and over all [s]
 */
export function decompositions(scenario: Scenario, frame: OutcomeFrame, depletion: { kinds: Estimate[], all: Estimate }): { kinds: Decomposition[], all: Decomposition } {
  const parts = scenario.sites.map(site => stillParts(scenario, site.attachProbability))
  const kinds = parts.map(({ collisionS, failedHitsS }, j) => ({ collisionS, failedHitsS, depletionS: depletion.kinds[j]! }))
  const present = parts.map((part, j) => ({ part, weight: frame.sitesPerClass[j]! / frame.siteCount })).filter(one => one.weight > 0)
  const failed = present.some(one => one.part.failedHitsS === null)
    ? null
    : present.reduce((sum, one) => sum + one.weight * one.part.failedHitsS!, 0)
  return { kinds, all: { collisionS: parts[0]?.collisionS ?? null, failedHitsS: failed, depletionS: depletion.all } }
}
