/** Sizes of lattice and tables, judged from the scenario alone: nothing large is allocated to find out that it is too large. */
import type { Scenario } from '../schemas/scenario'
import { voxelCounts } from './frame'
import { siteCountOf } from './plan'

/** Bytes a voxel takes in a plan and in the kernel: flag, six neighbours' sites, occupancy, free list. */
const BYTES_PER_VOXEL = 32
/** Time bins of a landing law: 1 step wide at first, then growing by 1.19 up to 256 steps; even and odd apart. */
const LANDING_BINS = 24
/** Steps after which a vesicle's waiting law decays as one exponential, per squared box width: held walls let it go, sealed ones keep it. */
const SETTLING = { held: 0.95, sealed: 2.9 } as const

export interface LatticeSize {
  sites: number
  voxels: number
  freeVoxels: number
  /** Steps of the whole run. */
  steps: number
  latticeBytes: number
  /** Distinct start voxels after the mirror planes of ribbon and box are used. */
  startClasses: number
  /** Steps of the waiting-time tables of `attempt`. */
  settlingSteps: number
}

/** Size of a scenario's lattice and of what the tables are made of [counts, bytes]. */
export function latticeSize(scenario: Scenario): LatticeSize {
  const { size, voxels, freeVoxels } = voxelCounts(scenario)
  const { spacingNm, diffusionUm2PerS } = scenario.medium
  const stepS = (spacingNm / 1000) ** 2 / (6 * diffusionUm2PerS)
  const steps = Math.max(1, Math.round(scenario.schedule.durationS / stepS))
  const sites = siteCountOf(scenario)
  const plate = scenario.ribbon.shape === 'plate' ? scenario.ribbon : { columns: 1, rows: 1, faces: 1 as const }
  const mirrored = (n: number, of: number) => (n - of) % 2 === 0 ? Math.ceil(of / 2) : of
  const startClasses = mirrored(size[0], plate.columns) * mirrored(size[1], plate.rows) * (plate.faces === 2 && size[2] % 2 === 0 ? 2 : 1)
  const supply = scenario.reservoir.supply === 'sealed' ? 'sealed' : 'held'
  const settlingSteps = Math.min(steps, Math.ceil(SETTLING[supply] * Math.max(...size) ** 2))
  return { sites, voxels, freeVoxels, steps, latticeBytes: voxels > 0 ? (size[0] + 2) * (size[1] + 2) * (size[2] + 2) * BYTES_PER_VOXEL : 0, startClasses, settlingSteps }
}

/** Vesicle classes that move at different paces need tables of their own; immobile ones none. */
const mobilities = (scenario: Scenario) => Math.max(1, new Set(scenario.vesicles.map(one => one.mobilityFactor).filter(factor => factor > 0)).size)

/** Bytes of the tables of `attempt`: waiting laws per start class and step, landing laws per start class, bin and site. */
export function attemptTableBytes(scenario: Scenario, size = latticeSize(scenario)): number {
  return mobilities(scenario) * (size.startClasses * (LANDING_BINS * 2 * size.sites * 4 + size.settlingSteps * 12) + size.steps * 4)
}
/** Bytes of the tables of `touch`: arrivals per step and site, as alias cells. */
export function touchTableBytes(scenario: Scenario, size = latticeSize(scenario)): number {
  return mobilities(scenario) * size.steps * size.sites * 12
}
