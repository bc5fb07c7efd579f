/** What the attempt sampler's tables would cost, before anything is solved: for routing and for the cost shown to a person. */
import type { WalkPlan } from './types'

/** Tables above this are not made; the walk from first touches takes over [bytes]. */
export const ATTEMPT_TABLE_LIMIT = 32 * 1024 * 1024
/** Sites above this are not sampled from attempt to attempt [count]. */
export const ATTEMPT_SITE_LIMIT = 1000
/** Voxels around the ribbon that the landing law is solved in, and steps that it is solved for by a vesicle that moves in every step. */
const NEAR = { margin: 12, steps: 256 } as const
/** The same where a vesicle comes back often and remembers where from. */
const FAR = { margin: 16, steps: 512 } as const
/** Sites above which a vesicle remembers for long where on the plate it was [count]. */
const SMALL_PLATE = 256
/** Widths of landing bins grow by this ratio [1]. */
export const BIN_RATIO = 1.12
/** Longest explicit waiting time: outcomes are 16-bit [steps]. */
export const WAIT_LIMIT = 65_000
/** Longest run: base-256 digits of late times [steps]. */
const STEP_LIMIT = 255 * 65536

/**
 * How far and how long the landing law is solved, so that its error per jump stays below 3e-3 (full solves in tests/unit/attempt).
 * @param plan - compiled plan
 * @param attemptChance - s_max [1]
 * @param mobility - chance of moving in a step; a slower vesicle spreads as far in more steps [1]
 * @returns margin around the ribbon [voxels] and steps [1]
 */
export function landingSpan(plan: WalkPlan, attemptChance: number, mobility: number): { margin: number, steps: number } {
  const ends = extent(plan), twoFaces = ends[2]![1] > ends[2]![0]
  const beyond = plan.supply === 'sealed' || ends[0]![0] - 1 > NEAR.margin
  const { steps } = plan.siteCount > SMALL_PLATE || (twoFaces && beyond && attemptChance > 0.5) ? FAR : NEAR
  return { margin: steps === FAR.steps && beyond ? FAR.margin : NEAR.margin, steps: Math.min(4096, Math.round(steps / mobility)) }
}

/**
 * Upper ends of the landing bins: one step each at first, then growing by a fixed ratio.
 * @param last - end of the last bin [steps]
 * @returns ends, ascending [steps]
 */
export function landingBins(last: number): number[] {
  const ends: number[] = []
  for (let end = 1; ; end = Math.min(last, Math.max(end + 1, end * BIN_RATIO))) {
    ends.push(Math.floor(end))
    if (end >= last) return ends
  }
}

/** Late bins, after the solved steps, grow by this ratio; there are four, and one for all that is later [1]. */
const LATE_RATIO = 1.5
const LATE_BINS = 4
/**
 * Upper ends of the late bins; the last one, a step long here, stands for all later waits.
 * @param solved - end of the last solved bin [steps]
 * @returns ends, ascending [steps]
 */
export function lateBins(solved: number): number[] {
  const ends: number[] = []
  for (let i = 0; i < LATE_BINS; i++) ends.push(Math.max(solved + i + 1, Math.round((ends[i - 1] ?? solved) * LATE_RATIO)))
  return [...ends, ends[LATE_BINS - 1]! + 1]
}

/**
 * s_max of a plan's mobility class: the largest attachment probability of its vesicles, up to 1, 1/2, 1/4, …, so that tables survive edits.
 * @param plan - compiled plan
 * @param mobility - chance of moving in a step that names the class [1]
 * @returns the probability; 0 where none attaches [1]
 */
export function attemptCeiling(plan: WalkPlan, mobility: number): number {
  let largest = 0
  plan.vesicles.forEach((vesicle, i) => {
    if (vesicle.mobilityFactor === mobility) for (const row of plan.attachProbability) largest = Math.max(largest, row[i]!)
  })
  let ceiling = 1
  while (ceiling / 2 >= largest && ceiling > 1 / 4096) ceiling /= 2
  return largest > 0 ? ceiling : 0
}

/**
 * Different mobilities above 0 whose vesicles can attach somewhere.
 * @param plan - compiled plan
 * @returns chances of moving in a step [1]
 */
export function attemptMobilities(plan: WalkPlan): number[] {
  return [...new Set(plan.vesicles.map(one => one.mobilityFactor))].filter(mobility => mobility > 0 && attemptCeiling(plan, mobility) > 0)
}

/** Lowest and highest coordinate of the voxels in front of sites, by axis. */
function extent(plan: WalkPlan): [number, number][] {
  const px = plan.nx + 2, py = plan.ny + 2
  const ends: [number, number][] = [[Infinity, 0], [Infinity, 0], [Infinity, 0]]
  for (const p of plan.voxelOfSite) {
    const row = Math.floor(p / px), at = [p % px, row % py, Math.floor(row / py)]
    ends.forEach((end, axis) => {
      end[0] = Math.min(end[0], at[axis]!)
      end[1] = Math.max(end[1], at[axis]!)
    })
  }
  return ends
}

/** Squared π, over the 6 of a hop's six directions: decay per step of a mode of one half wave, times length squared. */
const MODE = 9.8696 / 6

/** Gap between the slowest mode that sites feel along an axis and the next one. Mirror symmetry removes the odd modes. */
function modeGap(plan: WalkPlan, n: number, [low, high]: [number, number], axis: number): number {
  const centred = low + high === n + 1
  if (plan.supply === 'sealed') return (centred ? 4 : 1) * MODE / n ** 2
  // A wall below (one face): modes of an odd number of quarter waves.
  if (axis === 2 && low === 1) return 2 * MODE / (n + 0.5) ** 2
  return (centred ? 8 : 3) * MODE / (n + 1) ** 2
}

/**
 * Steps after which the waiting law is one exponential, roughly and from above: from the gap between the two slowest modes along the slowest axis.
 * @param plan - compiled plan, held or sealed
 * @param mobility - chance of moving in a step [1]
 * @returns steps [1]
 */
export function estimateWaitSteps(plan: WalkPlan, mobility: number): number {
  return Math.min(plan.steps, WAIT_LIMIT, settlingSteps(plan, mobility))
}

function settlingSteps(plan: WalkPlan, mobility: number): number {
  const ends = extent(plan), gap = Math.min(...[plan.nx, plan.ny, plan.nz].map((n, axis) => modeGap(plan, n, ends[axis]!, axis)))
  return Math.ceil((600 + 8 / gap) / mobility)
}

/** True when the waiting law of a run may neither end nor settle within the steps that tables can hold. */
const neverSettles = (plan: WalkPlan, mobility: number) => Math.min(plan.steps, settlingSteps(plan, mobility)) > WAIT_LIMIT

/** Classes of starts: the mirror planes that a plan's sites have, judged by where the sites lie. */
function classCount(plan: WalkPlan): number {
  const sizes = [plan.nx, plan.ny, plan.nz]
  return Math.ceil(extent(plan).reduce((classes, [low, high], axis) => {
    if (low + high !== sizes[axis]! + 1 || high === low) return classes
    return axis === 2 ? classes / 2 : Math.ceil((high - low + 1) / 2) * classes / (high - low + 1)
  }, plan.siteCount))
}

/**
 * Bytes that the tables of a plan take at most.
 * @param plan - compiled plan
 * @returns the size; Infinity where the sampler does not apply [bytes]
 */
export function attemptTableBytes(plan: WalkPlan): number {
  if (plan.supply === 'stirred' || plan.crowding !== 'independent' || plan.siteCount > ATTEMPT_SITE_LIMIT || plan.steps > STEP_LIMIT) return Infinity
  const classes = classCount(plan), sites = plan.siteCount
  return attemptMobilities(plan).reduce((bytes, mobility) => {
    if (neverSettles(plan, mobility)) return Infinity
    const waits = classes * (estimateWaitSteps(plan, mobility) + 3) * 8
    // Short waits reach few sites: about a third of the full rows is never made.
    const landings = classes * (landingBins(landingSpan(plan, attemptCeiling(plan, mobility), mobility).steps).length + LATE_BINS + 1) * 2 * (sites * 4 + 8)
    return bytes + waits + landings + classes * sites * 2 + sites * 22 + 40_000
  }, 0)
}

/** True when a plan can be sampled from attempt to attempt. */
export function attemptApplies(plan: WalkPlan): boolean {
  return attemptTableBytes(plan) <= ATTEMPT_TABLE_LIMIT
}
