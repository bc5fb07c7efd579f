/** Sizes of lattice and tables, judged from the scenario alone: nothing large is allocated to find out that it is too large. */
import type { Scenario } from '../schemas/scenario'
import { attemptCeiling, attemptMobilities, attemptTableBytes as attemptBytesOfPlan, estimateWaitSteps } from './attempt-size'
import { frameOf, voxelCounts } from './frame'
import type { WalkPlan } from './types'

/** Bytes a voxel takes in a plan and in the kernel: flag, six neighbours' sites, occupancy, free list. */
const BYTES_PER_VOXEL = 32
/** Bytes of a cell of a first-touch table while it is made: weight and alias cell. */
const BYTES_PER_TOUCH_CELL = 12

export interface LatticeSize {
  sites: number
  voxels: number
  freeVoxels: number
  /** Steps of the whole run. */
  steps: number
  latticeBytes: number
  /** Infinity where the algorithm does not apply. */
  attemptBytes: number
  touchBytes: number
  /** Voxel-steps of the linear solves behind the tables of `attempt`, and of `touch`. */
  attemptSolve: number
  touchSolve: number
  /** Attempts that `attempt` draws in a step of one replicate [1]. */
  attemptsPerStep: number
}

/** Padded indices of the first and last voxel in front of a site: all that the size of tables asks of the sites' places. */
function cornersOf(scenario: Scenario, [nx, ny, nz]: readonly [number, number, number]): Int32Array {
  const { ribbon } = scenario
  const { columns, rows, faces } = ribbon.shape === 'plate' ? ribbon : { columns: 1, rows: 1, faces: 1 as const }
  const x = Math.floor((nx - columns) / 2) + 1, y = Math.floor((ny - rows) / 2) + 1, z = Math.floor((nz - 1) / 2) + 1
  const at = (column: number, row: number, layer: number) => (layer * (ny + 2) + row) * (nx + 2) + column
  return faces === 1
    ? Int32Array.of(at(x, y, 1), at(x + columns - 1, y + rows - 1, 1))
    : Int32Array.of(at(x, y, z - 1), at(x + columns - 1, y + rows - 1, z + 1))
}

/** A plan that has everything but its voxels and all sites but two: enough for the table sizes, cheap for any terminal. */
function sketchOf(scenario: Scenario, size: readonly [number, number, number]): WalkPlan {
  return { ...frameOf(scenario), flags: new Uint8Array(0), siteBehind: new Int32Array(0), voxelOfSite: cornersOf(scenario, size) }
}

/** Size of a scenario's lattice and of what the tables are made of [counts, bytes]. */
export function latticeSize(scenario: Scenario): LatticeSize {
  const { size, voxels, freeVoxels } = voxelCounts(scenario)
  const plan = sketchOf(scenario, size)
  const { siteCount: sites, steps } = plan
  const walks = voxels > 0 && plan.crowding === 'independent'
  const moving = new Set(plan.vesicles.map(one => one.mobilityFactor).filter(factor => factor > 0)).size
  return {
    sites, voxels, freeVoxels, steps, latticeBytes: voxels > 0 ? (size[0] + 2) * (size[1] + 2) * (size[2] + 2) * BYTES_PER_VOXEL : 0,
    attemptBytes: walks ? attemptBytesOfPlan(plan) : Infinity,
    touchBytes: walks ? BYTES_PER_TOUCH_CELL * steps * sites * moving : Infinity,
    attemptSolve: walks ? attemptMobilities(plan).reduce((sum, mobility) => sum + voxels * estimateWaitSteps(plan, mobility), 0) : 0,
    touchSolve: voxels * steps * moving,
    attemptsPerStep: plan.occupancy / 6 * sites * plan.vesicles.reduce((sum, { share, mobilityFactor }) => sum + share * mobilityFactor * (mobilityFactor > 0 ? attemptCeiling(plan, mobilityFactor) : 0), 0),
  }
}
