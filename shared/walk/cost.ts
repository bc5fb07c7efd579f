/** What a run will cost, from the scenario alone; and which sizes are refused, with the estimate and a smaller suggestion. */
import { SAVED_REPLICATES_LIMIT } from '../schemas/api/run'
import type { FieldProblem } from '../schemas/problem'
import { occupancyOf, SCENARIO_LIMITS, stepSeconds, type Scenario } from '../schemas/scenario'
import { siteTotal } from '../kinetics/closed-form'
import { blockRanges } from './merge'
import { megabytes, routeAlgorithm, TABLE_LIMIT_BYTES } from './route'
import { latticeSize, type LatticeSize } from './table-size'
import type { Algorithm, AskedAlgorithm } from './types'

export const VOXEL_STEPS_LIMIT = 1e11
export const SAVED_BYTES_LIMIT = 8 * 2 ** 20
export { SAVED_REPLICATES_LIMIT, TABLE_LIMIT_BYTES }

/** Seconds per unit of work, one worker, WASM, measured on two 2-core machines; the run's own pace refines the estimate. */
const SECONDS_PER = {
  vesicleStep: 3e-9, exclusiveVesicleStep: 5.8e-9, attempt: 3.5e-8, touchedStep: 2.8e-9,
  solvedVoxelStep: 1.4e-9, settledVoxelStep: 2e-10, landingByte: 5e-7, replicate: 2e-5, sample: 3e-8, stirredSiteStep: 2.6e-9,
} as const
/** Share of the vesicles in the box that have touched a site and must be followed, on average over a long run. */
const TOUCHED = { held: 0.1, sealed: 0.5 } as const

export interface CostRefusal extends FieldProblem { suggestion: string }
export interface CostEstimate {
  algorithm: Algorithm | null
  sites: number
  voxels: number
  steps: number
  /** Lattice and tables of one worker. */
  tableBytes: number
  /** Tables once, for one worker [s]. */
  setupSeconds: number
  /** One replicate on one worker [s]. */
  secondsPerReplicate: number
  /** Whole run on one worker, tables included [s]. */
  seconds: number
  /** Blocks as JSON, what saving would send. */
  savedBytes: number
  /** Null when the outcome can be saved to the bench; else why it stays on the device. */
  unsavable: string | null
  /** Why the run cannot start; empty when it can. */
  refusals: CostRefusal[]
}

/**
 * Estimates a run and judges it against the joint limits: voxels × steps ≤ 1e11, tables ≤ 256 MB, replicates 1…1,000,000; a saved run ≤ 50,000 replicates and 8 MB.
 * @param scenario - with defaults filled in
 * @param replicates - asked for [1]
 * @param asked - algorithm asked for
 * @param pace - measured over estimated time so far on this machine [1]
 * @returns counts, bytes, seconds on one worker [s], and refusals with their path in scenario or order
 */
export function estimateCost(scenario: Scenario, replicates: number, asked: AskedAlgorithm = 'auto', pace = 1): CostEstimate {
  const size = latticeSize(scenario)
  const route = routeAlgorithm(scenario, asked, size)
  const { algorithm } = route
  const tableBytes = size.latticeBytes + tablesOf(algorithm, size)
  const setupSeconds = pace * setupOf(algorithm, size), secondsPerReplicate = pace * replicateOf(algorithm, scenario, size)
  const savedBytes = savedBytesOf(scenario, replicates, size)
  const refusals = [
    ...replicatesRefusal(replicates), ...fitRefusal(scenario),
    ...(route.refusal === null ? [] : [{ path: 'algorithm', message: route.refusal, suggestion: 'Leave the algorithm at “auto”.' }]),
    ...sizeRefusals(scenario, size, tableBytes),
  ]
  return {
    algorithm, sites: size.sites, voxels: size.voxels, steps: size.steps, tableBytes, setupSeconds, secondsPerReplicate,
    seconds: setupSeconds + replicates * secondsPerReplicate, savedBytes, unsavable: unsavable(replicates, savedBytes), refusals,
  }
}

function tablesOf(algorithm: Algorithm | null, size: LatticeSize): number {
  if (algorithm === 'attempt') return size.attemptBytes
  return algorithm === 'touch' ? size.touchBytes : 0
}

function setupOf(algorithm: Algorithm | null, size: LatticeSize): number {
  if (algorithm === 'touch') return size.touchSolve * SECONDS_PER.solvedVoxelStep
  return algorithm === 'attempt' ? size.attemptSolve * SECONDS_PER.settledVoxelStep + size.attemptBytes * SECONDS_PER.landingByte : 0
}

function replicateOf(algorithm: Algorithm | null, scenario: Scenario, size: LatticeSize): number {
  const { medium, reservoir, schedule } = scenario, { sites, freeVoxels, steps } = size
  const vesicles = occupancyOf(medium) * freeVoxels
  const base = SECONDS_PER.replicate + Math.min(steps, schedule.durationS * 1000 / schedule.sampleEveryMs) * SECONDS_PER.sample
  if (algorithm === 'stirred') return base + sites * steps * SECONDS_PER.stirredSiteStep
  if (algorithm === 'touch') return base + vesicles * TOUCHED[reservoir.supply === 'sealed' ? 'sealed' : 'held'] * steps * SECONDS_PER.touchedStep
  if (algorithm === 'attempt') return base + size.attemptsPerStep * steps * SECONDS_PER.attempt
  return base + vesicles * steps * (medium.crowding === 'exclusive' ? SECONDS_PER.exclusiveVesicleStep : SECONDS_PER.vesicleStep)
}

/** Bytes of the blocks as JSON: sums and squares per sample, events and exposure per replicate; digits by size of the numbers. */
function savedBytesOf(scenario: Scenario, replicates: number, { steps }: LatticeSize): number {
  if (!(replicates >= 1 && Number.isFinite(replicates))) return 0
  const { schedule, sites } = scenario
  const blocks = blockRanges(Math.min(replicates, SCENARIO_LIMITS.replicates[1])), perBlock = Math.min(replicates, blocks[0]!.to)
  const samples = Math.min(steps, Math.floor(schedule.durationS * 1000 / schedule.sampleEveryMs)) + 1
  const filled = siteTotal(scenario.ribbon) / sites.length
  const digits = (value: number) => Math.floor(Math.log10(Math.max(1, value))) + 2 // the comma included
  const rows = sites.length * (digits(perBlock * filled) + digits(perBlock * filled * filled)) + (sites.length === 2 ? digits(perBlock * filled * filled * 4) : 0)
  const ready = sites.some(site => site.readyPerS !== null) ? 2 : 1
  const perReplicate = sites.length * (digits(filled) + digits(filled * steps) + (schedule.decline ? digits(filled * steps * 65536) : 0))
  return blocks.length * (samples * rows * ready + Math.min(512, steps) * 3 + 200) + replicates * perReplicate
}

function unsavable(replicates: number, savedBytes: number): string | null {
  if (replicates > SAVED_REPLICATES_LIMIT) return `A saved run has at most ${SAVED_REPLICATES_LIMIT.toLocaleString('en-GB')} replicates; this one stays on this device as a file.`
  if (savedBytes > SAVED_BYTES_LIMIT) return `A saved run has at most ${megabytes(SAVED_BYTES_LIMIT)}; this one comes to about ${megabytes(savedBytes)} and stays on this device as a file. Fewer samples make it smaller.`
  return null
}

function replicatesRefusal(replicates: number): CostRefusal[] {
  const [least, most] = SCENARIO_LIMITS.replicates
  if (Number.isInteger(replicates) && replicates >= least && replicates <= most) return []
  return [{ path: 'replicates', message: `Replicates: a whole number from ${least} to ${most.toLocaleString('en-GB')} is wanted; ${replicates} was read.`, suggestion: replicates > most ? `Start with ${most.toLocaleString('en-GB')}.` : 'Start with 200.' }]
}

/** A ribbon that its sealed terminal cannot hold. */
function fitRefusal({ ribbon, reservoir, medium }: Scenario): CostRefusal[] {
  if (reservoir.supply !== 'sealed') return []
  const spacingUm = medium.spacingNm / 1000
  const plate = ribbon.shape === 'plate' ? ribbon : { columns: 1, rows: 1, faces: 1 }
  return [plate.columns, plate.rows, plate.faces === 2 ? 3 : 1].flatMap((least, axis) => {
    const voxels = Math.max(1, Math.round(reservoir.sizeUm[axis]! / spacingUm))
    return voxels >= least
      ? []
      : [{ path: `reservoir.sizeUm.${axis}`, message: `The ribbon needs ${least} voxels of ${medium.spacingNm} nm here; the terminal has ${voxels}.`, suggestion: `At least ${(least * spacingUm).toPrecision(3)} µm.` }]
  })
}

function sizeRefusals(scenario: Scenario, size: LatticeSize, tableBytes: number): CostRefusal[] {
  const { reservoir, medium } = scenario
  const where = reservoir.supply === 'sealed' ? 'reservoir.sizeUm' : reservoir.supply === 'held' ? 'reservoir.marginSites' : 'schedule.durationS'
  const refusals: CostRefusal[] = []
  if (size.voxels * size.steps > VOXEL_STEPS_LIMIT) {
    const longest = Math.floor(VOXEL_STEPS_LIMIT / size.voxels) * stepSeconds(medium)
    refusals.push({
      path: 'schedule.durationS',
      message: `${size.voxels.toLocaleString('en-GB')} voxels × ${size.steps.toLocaleString('en-GB')} steps = ${(size.voxels * size.steps).toExponential(1)}; at most ${VOXEL_STEPS_LIMIT.toExponential(0)}.`,
      suggestion: `At most ${floored(longest)} s in this terminal, or a smaller terminal.`,
    })
  }
  if (tableBytes > TABLE_LIMIT_BYTES)
    refusals.push({ path: where, message: `Lattice and tables come to about ${megabytes(tableBytes)}; at most ${megabytes(TABLE_LIMIT_BYTES)}.`, suggestion: smallerTerminal(scenario, size) })
  return refusals
}

/** Two figures, rounded down, so that what is suggested is allowed. */
const floored = (value: number): string => {
  const unit = 10 ** (Math.floor(Math.log10(value)) - 1)
  return String(Number((Math.floor(value / unit) * unit).toPrecision(2)))
}

/** A terminal whose lattice takes half of what is allowed. */
function smallerTerminal({ reservoir }: Scenario, size: LatticeSize): string {
  const shrink = Math.cbrt(TABLE_LIMIT_BYTES / 2 / Math.max(1, size.latticeBytes))
  if (reservoir.supply === 'sealed' && shrink < 1) return `For example ${reservoir.sizeUm.map(um => (um * shrink).toPrecision(2)).join(' × ')} µm.`
  if (reservoir.supply === 'held' && shrink < 1) return `For example a margin of ${Math.max(SCENARIO_LIMITS.marginSites[0], Math.floor(reservoir.marginSites * shrink))} voxels, or fewer sites.`
  return 'Fewer sites or a shorter duration.'
}

/** Sites and tables up to which a preview is walked. */
export const PREVIEW = { seed: 'preview', replicates: 400, sites: 1000, tableBytes: 32 * 2 ** 20 } as const
/**
 * Why a scenario gets no preview walk; null when it gets one.
 * @param scenario - with defaults filled in
 * @param mostSeconds - patience for the whole preview on one worker [s]
 * @param pace - measured over estimated time on this machine [1]
 * @returns a sentence, or null
 */
export function previewRefusal(scenario: Scenario, mostSeconds: number, pace = 1): string | null {
  const cost = estimateCost(scenario, PREVIEW.replicates, 'auto', pace)
  if (cost.refusals[0]) return cost.refusals[0].message
  if (cost.sites > PREVIEW.sites) return `A preview is walked for up to ${PREVIEW.sites.toLocaleString('en-GB')} sites; this ribbon has ${cost.sites.toLocaleString('en-GB')}.`
  if (cost.tableBytes > PREVIEW.tableBytes) return `A preview holds up to ${megabytes(PREVIEW.tableBytes)} of lattice and tables; this terminal needs about ${megabytes(cost.tableBytes)}.`
  if (cost.seconds > mostSeconds) return `A preview of ${PREVIEW.replicates} replicates would take about ${Math.ceil(cost.seconds)} s here (${cost.algorithm === 'step' ? 'step-by-step walk' : `“${cost.algorithm}”`}); start a run instead.`
  return null
}
