/** Hits and attachments per empty site of a scenario, at rest and well mixed. */
import type { Scenario } from '../schemas/scenario'

/**
 * Sites of one ribbon.
 * @param ribbon - the scenario's ribbon
 * @returns rows × columns × faces, or 1 for an isolated site [1]
 */
export function siteTotal(ribbon: Scenario['ribbon']): number {
  return ribbon.shape === 'isolated' ? 1 : ribbon.rows * ribbon.columns * ribbon.faces
}

/**
 * Hits on one empty site per kind of vesicle: a·D·mᵢ·ρᵢ, the hop rate D/a² per direction times the occupancy ρᵢa³ of the voxel in front.
 * @param scenario - with defaults filled in
 * @returns one rate per kind of vesicle [1/s]
 */
export function hitRates(scenario: Pick<Scenario, 'medium' | 'vesicles'>): number[] {
  const { spacingNm, diffusionUm2PerS, densityPerUm3 } = scenario.medium
  const all = spacingNm / 1000 * diffusionUm2PerS * densityPerUm3
  return scenario.vesicles.map(vesicle => all * vesicle.mobilityFactor * vesicle.share)
}

/**
 * Attachment rate of an empty site of each kind at rest: a·pⱼ·Σᵢ D·mᵢ·ρᵢ·fᵢ.
 * @param scenario - with defaults filled in
 * @returns one rate per kind of site [1/s]
 */
export function attachRates(scenario: Pick<Scenario, 'medium' | 'vesicles' | 'sites'>): number[] {
  const effective = hitRates(scenario).reduce((sum, hits, i) => sum + hits * scenario.vesicles[i]!.attachFactor, 0)
  return scenario.sites.map(site => site.attachProbability * effective)
}
