/** The part of a plan that reading an outcome needs, without the lattice: cheap for any scenario, however large its terminal. */
import type { Scenario } from '../schemas/scenario'
import { realisedCounts } from '../kinetics/realised-counts'
import { boxSize } from './geometry'
import { compilePlan } from './plan'
import type { WalkPlan } from './types'

export type OutcomeFrame = Omit<WalkPlan, 'flags' | 'siteBehind' | 'voxelOfSite'>

/** Voxels of the box and how many of them vesicles can be in; zeros for a stirred supply. */
export function voxelCounts(scenario: Scenario): { size: [number, number, number], voxels: number, freeVoxels: number } {
  const size = boxSize(scenario)
  const voxels = size[0] * size[1] * size[2]
  const { ribbon } = scenario
  const plate = voxels > 0 && ribbon.shape === 'plate' && ribbon.faces === 2 ? ribbon.rows * ribbon.columns : 0
  return { size, voxels, freeVoxels: voxels - plate }
}

/**
 * Compiles everything but the lattice.
 * @param scenario - with defaults filled in
 * @returns the plan without its voxel arrays; lengths in voxels [1], times in steps [1], `stepS` in seconds [s]
 */
export function frameOf(scenario: Scenario): OutcomeFrame {
  const { flags: _flags, siteBehind: _behind, voxelOfSite: _voxel, ...frame } = compilePlan({ ...scenario, reservoir: { supply: 'stirred' } })
  const { size, freeVoxels } = voxelCounts(scenario)
  const numbers = scenario.reservoir.supply === 'sealed' ? realisedCounts(scenario.vesicles.map(one => one.share), Math.round(frame.occupancy * freeVoxels)) : []
  return {
    ...frame, supply: scenario.reservoir.supply, nx: size[0], ny: size[1], nz: size[2], freeVoxels,
    vesicles: frame.vesicles.map((vesicle, i) => ({ ...vesicle, number: numbers[i] ?? null })),
  }
}
