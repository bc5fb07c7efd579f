/**
 * First-touch sampling: only vesicles that reach the voxel in front of a site are walked, from that arrival on.
 * Exact in law for independent vesicles: numbers and arrivals come from the first-touch table, later steps from the plain walk.
 */
import { CountTable, Plan } from './plan'
import { drawCount, s0, s1, s2, s3, seedStream, storeState } from './rng'
import { beginStep, countSites, openSites, sampleAt, sampleRest } from './sites'
import { openTally } from './tally'
import { clearVesicles, enter, moveVesicles } from './vesicles'

/** Arrivals of a plan, written by the host (workers/touch.ts). */
@unmanaged
export class Arrivals {
  /** Alias cells and number of arrivals per vesicle class; 0 for a class that never moves. */
  cells0: usize
  cells1: usize
  counts0: usize
  counts1: usize
  /** Voxels in front of sites: i32[voxelCount]; alias cell = step x voxelCount + voxel. */
  voxels: usize
  voxelCount: i32
  cellCount: i32
  /** First arrival of each step, i32[2][steps]; next arrival and voxel, i32 pairs. */
  heads: usize
  nodes: usize
}

let drawn: i32 = 0

/** Draws the arrivals of one class into its list per step: two draws each, cell and threshold. */
function drawArrivals(plan: Plan, arrivals: Arrivals, cells: usize, counts: usize, heads: usize): void {
  memory.fill(heads, 0xFF, <usize>plan.steps << 2)
  if (cells == 0) return
  const voxels = arrivals.voxels, voxelCount = arrivals.voxelCount, cellCount = <u64>arrivals.cellCount, perVoxel = 1 / <f64>voxelCount
  const count = drawCount(changetype<CountTable>(counts)), nodes = arrivals.nodes
  let a = s0, b = s1, c = s2, d = s3, node = drawn
  for (const end = drawn + count; node < end; node++) {
    const first = rotl<u32>(a + d, 7) + a
    let shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotl<u32>(d, 11)
    const second = rotl<u32>(a + d, 7) + a
    shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotl<u32>(d, 11)
    let cell = <u32>((<u64>first * cellCount) >> 32)
    const at = cells + (<usize>cell << 3)
    if (second >= load<u32>(at)) cell = load<u32>(at, 4)
    // The half keeps the product off whole numbers, so that rounding cannot change its floor.
    const step = <i32>((<f64>cell + 0.5) * perVoxel), head = heads + (<usize>step << 2), to = nodes + (<usize>node << 3)
    store<i32>(to, load<i32>(head))
    store<i32>(to, load<i32>(voxels + (<usize>(cell - step * voxelCount) << 2)), 4)
    store<i32>(head, node)
  }
  storeState(a, b, c, d)
  drawn = node
}

@inline
function admit(plan: Plan, arrivals: Arrivals, vesicleClass: i32, n: i32): void {
  let node = load<i32>(arrivals.heads + (<usize>(vesicleClass * plan.steps + n) << 2))
  while (node >= 0) {
    const at = arrivals.nodes + (<usize>node << 3)
    enter(plan, vesicleClass, load<i32>(at, 4))
    node = load<i32>(at)
  }
}

/** Walks replicates [from, to). */
export function walkTouch(plan: Plan, tally: usize, low: u32, high: u32, from: i32, to: i32, arrivals: Arrivals): void {
  openTally(plan, tally, to - from)
  countSites(plan)
  for (let replicate = from; replicate < to; replicate++) {
    seedStream(low, high, replicate)
    openSites(plan, replicate - from)
    clearVesicles()
    drawn = 0
    drawArrivals(plan, arrivals, arrivals.cells0, arrivals.counts0, arrivals.heads)
    if (plan.vesicleClasses == 2) drawArrivals(plan, arrivals, arrivals.cells1, arrivals.counts1, arrivals.heads + (<usize>plan.steps << 2))
    for (let n = 0; ; n++) {
      sampleAt(n)
      if (n == plan.steps) break
      if (!beginStep(n)) {
        sampleRest()
        break
      }
      admit(plan, arrivals, 0, n)
      if (plan.vesicleClasses == 2) admit(plan, arrivals, 1, n)
      moveVesicles(plan, n)
    }
  }
}
