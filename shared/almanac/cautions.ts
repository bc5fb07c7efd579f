/** Cautions that a scenario itself decides: numbers outside published ranges, and places where the closed form does not hold. */
import { freeDiffusion } from '../kinetics/free-solution'
import { closedForm, siteTotal } from '../kinetics/closed-form'
import type { Scenario } from '../schemas/scenario'
import { occupancyOf } from '../schemas/scenario'
import { formatNumber, formatQuantity, formatTime } from '../units'
import type { Caution } from './caution'

export type { Caution } from './caution'

/** Mean attachment probability of a hit by a mobile vesicle over the sites that can attach [1]. */
function meanAttachment(scenario: Scenario): number {
  const mobile = scenario.vesicles.map(vesicle => vesicle.share * vesicle.mobilityFactor)
  const weight = mobile.reduce((sum, share) => sum + share, 0)
  if (weight === 0) return 0
  const factor = mobile.reduce((sum, share, i) => sum + share * scenario.vesicles[i]!.attachFactor, 0) / weight
  return factor * scenario.sites.reduce((sum, site) => sum + site.share * site.attachProbability, 0)
}

function diffusionCautions({ medium }: Scenario): Caution[] {
  const { diffusionUm2PerS, spacingNm } = medium
  const bound = freeDiffusion(spacingNm), path = 'medium.diffusionUm2PerS'
  const published = 'Published: about 0.015 µm²/s (goldfish bipolar) and 0.11 µm²/s (lizard cone).'
  if (diffusionUm2PerS > bound) return [{ id: 'A-04', path, sentence: `${formatQuantity(diffusionUm2PerS, 'µm²/s')} is faster than a free sphere of ${formatQuantity(spacingNm, 'nm')} in water at 25 °C, ${formatQuantity(bound, 'µm²/s')}.`, source: 'H-36, Stokes–Einstein', status: 'computed' }]
  if (diffusionUm2PerS > 1) return [{ id: 'A-04', path, sentence: `${formatQuantity(diffusionUm2PerS, 'µm²/s')} is far above the range of vesicles. ${published}`, source: 'H-30, H-31', status: 'unverified' }]
  if (diffusionUm2PerS < 0.001) return [{ id: 'A-04', path, sentence: `${formatQuantity(diffusionUm2PerS, 'µm²/s')} is far below the range of vesicles in ribbon terminals. ${published}`, source: 'H-30, H-31', status: 'unverified' }]
  return []
}

function mediumCautions(scenario: Scenario): Caution[] {
  const { medium } = scenario, found: Caution[] = []
  const occupancy = occupancyOf(medium)
  if (medium.spacingNm < 25 || medium.spacingNm > 60)
    found.push({ id: 'A-05', path: 'medium.spacingNm', sentence: `Vesicle diameters of 30 to 50 nm are published; this is ${formatQuantity(medium.spacingNm, 'nm')}. The spacing is the vesicle diameter: another spacing at the same s changes the rate.`, source: 'H-01 to H-04', status: 'unverified' })
  if (medium.densityPerUm3 > 3000 || medium.densityPerUm3 < 100)
    found.push({ id: 'density', path: 'medium.densityPerUm3', sentence: `Several hundred to about 2000 /µm³ are given for cones and rods; this is ${formatQuantity(medium.densityPerUm3, '1/µm³')}.`, source: 'H-14, no source traced', status: 'unverified' })
  if (occupancy > 0.25)
    found.push({ id: 'A-03', path: 'medium.densityPerUm3', sentence: `Occupancy ρa³ = ${formatNumber(occupancy)}, above 0.25: vesicles this crowded hinder each other, which lowers D itself. No walk on a lattice shows that.`, source: 'H-33, Rothman et al. 2016', status: 'looked up' })
  return found
}

function siteCautions(scenario: Scenario): Caution[] {
  const { durationS } = scenario.schedule
  return closedForm(scenario).classes.flatMap((one, j): Caution[] => {
    const path = `sites.${j}.attachProbability`
    if (one.sites === 0) return [{ id: 'rounded-away', path: `sites.${j}.share`, sentence: `The share of ${one.name} sites rounds to none of the ${siteTotal(scenario.ribbon)} sites of a ribbon.`, source: 'largest remainder', status: 'computed' }]
    if (one.ratePerS === 0) return [{ id: 'never', path, sentence: `No vesicle attaches at the ${one.name} sites; they never refill.`, source: 'the scenario itself', status: 'computed' }]
    if (1 / one.ratePerS > durationS) return [{ id: 'beyond', path, sentence: `By the closed form the ${one.name} sites need ${formatTime(1 / one.ratePerS)}, longer than the ${formatTime(durationS)} that are watched.`, source: 'τ = 1/(D·ρ·a·s)', status: 'computed' }]
    return []
  })
}

/** Where the closed form will not hold, and roughly by how much. Figures of own walks: one isolated site, 54 sites in a dense plate. */
function supplyCautions(scenario: Scenario): Caution[] {
  const { reservoir, ribbon, vesicles, medium, schedule } = scenario
  if (reservoir.supply === 'stirred') return []
  const found: Caution[] = [], s = meanAttachment(scenario)
  if (ribbon.shape === 'isolated' ? s > 0.328 : siteTotal(ribbon) > 1 && s > 0.08)
    found.push({ id: 'A-01', path: 'reservoir.supply', sentence: ribbon.shape === 'isolated'
      ? `Vesicles that just missed come back to the site: in the long run it fills ${formatNumber(1 + 0.3388 * s)} times as slowly as the closed form says.`
      : 'The sites of a plate empty their own neighbourhood: the walk is slower than the closed form, about 1.1 times at s = 0.1 and 1.9 times at s = 1 for 54 dense sites.', source: 'own lattice solution and walks', status: 'computed' })
  if (reservoir.supply === 'sealed') {
    const mobile = vesicles.reduce((sum, vesicle) => sum + (vesicle.mobilityFactor > 0 ? vesicle.share : 0), 0)
    const store = medium.densityPerUm3 * reservoir.sizeUm[0] * reservoir.sizeUm[1] * reservoir.sizeUm[2] * mobile
    const wanted = siteTotal(ribbon) * (1 - schedule.initialFill)
    if (wanted > 0.1 * store) found.push({ id: 'A-02', path: 'reservoir.sizeUm', sentence: `The sites to fill (${formatNumber(wanted)}) take more than a tenth of the ${formatNumber(store)} mobile vesicles: the store itself runs down.`, source: 'finite store, n = SM(1 − E)/(M − SE)', status: 'computed' })
  }
  return found
}

function scheduleCautions(scenario: Scenario): Caution[] {
  const { schedule, vesicles } = scenario, found: Caution[] = []
  const rates = closedForm(scenario).classes.filter(one => one.sites > 0 && one.ratePerS > 0).map(one => one.ratePerS)
  if (schedule.initialFill === 1 && schedule.releases.length === 0)
    found.push({ id: 'nothing', path: 'schedule.initialFill', sentence: 'Every site is filled from the start: there is nothing to refill.', source: 'the scenario itself', status: 'computed' })
  if (rates.length > 0 && schedule.sampleEveryMs / 1000 > 0.5 / Math.max(...rates))
    found.push({ id: 'sparse', path: 'schedule.sampleEveryMs', sentence: `The fastest sites refill with ${formatTime(1 / Math.max(...rates))}; samples ${formatTime(schedule.sampleEveryMs / 1000)} apart miss their start.`, source: 'τ = 1/(D·ρ·a·s)', status: 'computed' })
  vesicles.forEach((vesicle, i) => {
    if (vesicle.mobilityFactor === 0) found.push({ id: 'A-06', path: `vesicles.${i}.mobilityFactor`, sentence: `${formatNumber(100 * vesicle.share)} % of the vesicles do not move and never reach a site; 15 % (cone) to 80 % (mouse bipolar, at ribbons) are published.`, source: 'H-31, H-32', status: 'looked up' })
  })
  return found
}

/**
 * Cautions for a scenario, each with the field it belongs to and what it rests on. None of them refuses anything.
 * @param scenario - with defaults filled in
 * @returns cautions in the order of the form [1]
 */
export function cautionsFor(scenario: Scenario): Caution[] {
  return [diffusionCautions, mediumCautions, supplyCautions, siteCautions, scheduleCautions].flatMap(judge => judge(scenario))
}
