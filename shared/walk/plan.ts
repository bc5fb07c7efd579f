/** Compiles a scenario to voxels, steps and per-step probabilities: pure arithmetic (+ − × / and rounding), so that its bits are the same everywhere. */
import { realisedCounts } from '../kinetics/realised-counts'
import type { Scenario } from '../schemas/scenario'
import { chanceWithin, decayOver } from './deterministic'
import { boxOf, type Box } from './geometry'
import { classesOfSites } from './layout'
import type { PlanVesicle, WalkPlan } from './types'

const HISTOGRAM_BINS = 512

/** Sites of one ribbon of a scenario [count]. */
export function siteCountOf(scenario: Scenario): number {
  const { ribbon } = scenario
  return ribbon.shape === 'isolated' ? 1 : ribbon.rows * ribbon.columns * ribbon.faces
}

/** Time step and occupancy by plain products (Math.pow is not bit-equal across engines). */
function lattice(scenario: Scenario): { stepS: number, occupancy: number } {
  const { spacingNm, diffusionUm2PerS, densityPerUm3 } = scenario.medium
  const spacingUm = spacingNm / 1000
  return { stepS: spacingUm * spacingUm / (6 * diffusionUm2PerS), occupancy: densityPerUm3 * spacingUm * spacingUm * spacingUm }
}

/** Steps nearest to the sampling times, each once. */
function sampleStepsOf(scenario: Scenario, stepS: number, steps: number): Uint32Array {
  const { durationS, sampleEveryMs } = scenario.schedule
  const samples: number[] = []
  for (let k = 0; k * sampleEveryMs <= durationS * 1000 * (1 + 1e-9); k++) {
    const step = Math.min(steps, Math.round(k * sampleEveryMs / 1000 / stepS))
    if (samples.length === 0 || step > samples[samples.length - 1]!) samples.push(step)
  }
  return Uint32Array.from(samples)
}

function vesiclesOf(scenario: Scenario, occupancy: number, freeVoxels: number): PlanVesicle[] {
  const { vesicles, reservoir } = scenario
  const shares = vesicles.map(one => one.share)
  const numbers = reservoir.supply === 'sealed' ? realisedCounts(shares, Math.round(occupancy * freeVoxels)) : []
  return vesicles.map(({ share, attachFactor, mobilityFactor }, i) => ({ share, attachFactor, mobilityFactor, number: numbers[i] ?? null }))
}

function noBox(siteCount: number): Box {
  return { nx: 0, ny: 0, nz: 0, flags: new Uint8Array(0), siteBehind: new Int32Array(0), voxelOfSite: new Int32Array(siteCount).fill(-1), freeVoxels: 0 }
}

/**
 * Compiles a scenario.
 * @param scenario - a parsed scenario document
 * @returns the plan; lengths in voxels [1], times in steps [1], `stepS` in seconds [s]
 * @throws RangeError when the ribbon does not fit in a sealed terminal
 */
export function compilePlan(scenario: Scenario): WalkPlan {
  const { medium, reservoir, ribbon, sites, schedule, vesicles } = scenario
  const { stepS, occupancy } = lattice(scenario)
  const steps = Math.max(1, Math.round(schedule.durationS / stepS))
  const siteCount = siteCountOf(scenario)
  const sitesPerClass = realisedCounts(sites.map(one => one.share), siteCount)
  const box = reservoir.supply === 'stirred' ? noBox(siteCount) : boxOf(scenario)
  const histogramBinSteps = Math.ceil(steps / HISTOGRAM_BINS)
  return {
    supply: reservoir.supply, crowding: medium.crowding, ...box,
    siteCount, classOfSite: classesOfSites(sitesPerClass, ribbon.shape === 'plate' ? ribbon.classLayout : 'rows'), sitesPerClass,
    stepS, steps, sampleSteps: sampleStepsOf(scenario, stepS, steps), occupancy,
    vesicles: vesiclesOf(scenario, occupancy, box.freeVoxels),
    attachProbability: sites.map(site => vesicles.map(vesicle => site.attachProbability * vesicle.attachFactor)),
    initialFill: schedule.initialFill,
    releases: schedule.releases.map(({ atMs, fraction }) => ({ step: Math.round(atMs / 1000 / stepS), fraction })).filter(release => release.step < steps),
    detachPerStep: sites.map(site => chanceWithin(site.detachPerS * stepS)),
    readyPerStep: sites.map(site => site.readyPerS === null ? null : chanceWithin(site.readyPerS * stepS)),
    decline: schedule.decline && { restFactor: schedule.decline.restFactor, perStep: decayOver(stepS / schedule.decline.timeConstantS) },
    histogramBinSteps, histogramBins: Math.ceil(steps / histogramBinSteps),
  }
}
