/** Flux into one always-empty site from a uniform start: step by step, then by the modes that are left. */
import { stepDensity, type LinearLattice } from './linear-lattice'

/** Vesicles attached by each step, for a start of one vesicle a voxel. */
export interface CumulativeFlux {
  /** Expected attachments of an always-empty site within n steps, for one vesicle a voxel at rest [1]. */
  within: (steps: number) => number
  /** From this step on the flux is constant to 1e-13 of itself (held bath); Infinity otherwise [steps]. */
  steadyFrom: number
  /** Flux a step that it settles to (0 in a sealed terminal) [1]. */
  steady: number
  /** Steps that were solved before the rest was continued [steps]. */
  solved: number
}
export interface FluxOrder {
  /** Chance that a hop into the site attaches, at rest of any decline [1]. */
  attach: number
  /** Chance that a vesicle moves in a step [1]. */
  mobility: number
  /** Steps that are wanted [steps]. */
  steps: number
  /** Bath density relative to rest: 1 held, 0 where none borders [1]. */
  bath: 0 | 1
  /** Factor on `attach` in step k → k + 1, and the step from which it is constant [1]. */
  decline?: { factor: (step: number) => number, constantFrom: number }
  /** Most voxel-steps to spend; judged beforehand from the longest axis. */
  budget: number
  /** Voxels along the longest axis of the box [1]. */
  longestAxis: number
}

const WINDOW = 64 // steps between the points of a continuation; even, so that the parity of hops is kept
const SETTLED = 1e-10 // agreement of two continuations, relative

/** Steps until one mode is left, from the diffusion time of the box; measured: 1.7 (21 wide) to 1.2 (41 wide) squares held, 5.9 sealed. */
function expectedSteps(order: FluxOrder, sealed: boolean): number {
  const relax = (sealed ? 6 : 1.8) * order.longestAxis ** 2 / order.mobility + 4 * WINDOW
  return Math.min(order.steps, relax + (order.decline?.constantFrom ?? 0))
}

/** The geometric continuation of one parity: J(m + 64) − L = ratio·(J(m) − L). */
interface Mode { limit: number, ratio: number, excess: number }

function modeAt(flux: Float64Array, m: number, sealed: boolean): Mode {
  const a = flux[m - 2 * WINDOW]!, b = flux[m - WINDOW]!, c = flux[m]!
  if (sealed) return { limit: 0, ratio: c / b, excess: c }
  const step = b - a
  if (Math.abs(c - b) < 1e-15 * Math.abs(c) || step === 0) return { limit: c, ratio: 0, excess: 0 }
  const ratio = (c - b) / step
  const limit = c + (c - b) * ratio / (1 - ratio)
  return { limit, ratio, excess: c - limit }
}

/** Two windows of one mode that tell the same story: the rest may be continued. */
function agree(now: Mode, before: Mode, sealed: boolean): boolean {
  if (!(now.ratio >= 0 && now.ratio < 1)) return false
  if (sealed) return Math.abs((1 - now.ratio) / (1 - before.ratio) - 1) < 1e-4
  return Math.abs(now.limit / before.limit - 1) < SETTLED
}

/** Sum of J over the k steps after the last two solved ones, alternating between the modes of both parities. */
function continued(modes: readonly [Mode, Mode], k: number): number {
  let sum = 0
  for (const [offset, mode] of modes.entries()) {
    const count = Math.floor((k + 1 - offset) / 2) // steps of this parity among the k; modes[0] is next
    if (count <= 0) continue
    const perPair = mode.ratio ** (2 / WINDOW)
    sum += count * mode.limit
    if (mode.excess !== 0 && perPair > 0) sum += mode.excess * perPair * (perPair < 1 ? -Math.expm1(count * Math.log(perPair)) / (1 - perPair) : count)
  }
  return sum
}

/**
 * Solves the density step by step until what is left is one mode for each parity, and continues that mode.
 * The continuation is taken when two windows of 64 steps agree: in the limit to 1e-10 (held), in the decay rate to 1e-4 (sealed).
 * @param lattice - compact lattice of the plan
 * @param order - attachment [1], mobility [1], steps, bath, decline, budget [voxel-steps]
 * @returns cumulative flux for a start of one vesicle a voxel [1], or null when the budget does not reach
 */
export function cumulativeFlux(lattice: LinearLattice, order: FluxOrder): CumulativeFlux | null {
  const sealed = order.bath === 0 || !lattice.neighbours.includes(lattice.size)
  if (expectedSteps(order, sealed) * lattice.size > order.budget) return null
  const most = Math.min(order.steps, Math.floor(2 * order.budget / lattice.size))
  const flux = new Float64Array(most), sum = new Float64Array(most + 1)
  let from = new Float64Array(lattice.size + 1).fill(1), to = new Float64Array(lattice.size + 1)
  from[lattice.size] = order.bath
  let before: [Mode, Mode] | null = null
  for (let n = 0; n < most; n++) {
    const factor = order.decline ? order.decline.factor(n) : 1
    flux[n] = stepDensity(lattice, from, to, order.mobility, order.attach * factor)
    sum[n + 1] = sum[n]! + flux[n]!;
    [from, to] = [to, from]
    if ((n + 1) % WINDOW !== 0 || n < 3 * WINDOW || n - 3 * WINDOW < (order.decline?.constantFrom ?? 0)) continue
    const modes: [Mode, Mode] = [modeAt(flux, n - 1, sealed), modeAt(flux, n, sealed)] // the step after n has the parity of n − 1
    if (before && agree(modes[0], before[0], sealed) && agree(modes[1], before[1], sealed)) return continuedFlux(sum, n + 1, modes, sealed)
    before = modes
  }
  if (most < order.steps) return null
  return { within: steps => sum[steps]!, steadyFrom: Infinity, steady: Number.NaN, solved: most }
}

function continuedFlux(sum: Float64Array, solved: number, modes: [Mode, Mode], sealed: boolean): CumulativeFlux {
  const slowest = Math.max(...modes.map(mode => mode.ratio))
  const excess = Math.max(...modes.map(mode => Math.abs(mode.excess / mode.limit)))
  const windows = sealed ? Infinity : excess < 1e-13 || slowest === 0 ? 0 : Math.log(1e-13 / excess) / Math.log(slowest)
  return {
    within: steps => steps <= solved ? sum[steps]! : sum[solved]! + continued(modes, steps - solved),
    steadyFrom: solved + Math.ceil(windows) * WINDOW,
    steady: (modes[0].limit + modes[1].limit) / 2,
    solved,
  }
}
