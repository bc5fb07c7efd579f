/** Chances that follow from a plan and that every engine uses alike. */
import type { WalkPlan } from './types'

/**
 * Chance per step that an empty site of a class attaches a vesicle from a neighbourhood redrawn every step: (ρa³/6)·Σ share·mobility·p, summed over vesicle classes.
 * @param plan - compiled plan
 * @param siteClass - index of the site class [1]
 * @returns the chance without decline [1]
 */
export function stirredChance(plan: WalkPlan, siteClass: number): number {
  let sum = 0
  plan.vesicles.forEach((vesicle, i) => sum += vesicle.share * vesicle.mobilityFactor * plan.attachProbability[siteClass]![i]!)
  return plan.occupancy / 6 * sum
}

/**
 * Chance that the vesicle at a site is of class 0 where the walk itself does not tell (sites filled at the start; stirred supply): the classes in proportion to how often they attach, share·mobility·attachFactor; to their shares where none ever does.
 * @param plan - compiled plan
 * @returns the chance; 1 with a single vesicle class [1]
 */
export function firstOccupantChance(plan: WalkPlan): number {
  const [first, second] = plan.vesicles
  if (!first || !second) return 1
  const one = first.share * first.mobilityFactor * first.attachFactor, other = second.share * second.mobilityFactor * second.attachFactor
  return one + other > 0 ? one / (one + other) : first.share / (first.share + second.share)
}

/**
 * Inflow through one face of the held boundary under exclusion: chance per step that a vesicle tries to enter, and that it is of class 0 (share·mobility).
 * @param plan - compiled plan
 * @returns both chances [1]
 */
export function boundaryInflow(plan: WalkPlan): { perFace: number, firstClass: number } {
  const [first, second] = plan.vesicles
  const one = first ? first.share * first.mobilityFactor : 0, other = second ? second.share * second.mobilityFactor : 0
  return { perFace: plan.occupancy / 6 * (one + other), firstClass: one + other > 0 ? one / (one + other) : 1 }
}
