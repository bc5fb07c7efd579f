/** Writes a compiled plan into the kernel's memory, in the field order of assembly/plan.ts. */
import { boundaryInflow, firstOccupantChance, stirredChance } from '../shared/walk/chances'
import { gapTable, poissonTable, type CountTable } from '../shared/walk/counts'
import { FLAG, hopOffsets } from '../shared/walk/geometry'
import type { WalkPlan } from '../shared/walk/types'
import type { KernelHost } from './host'

/** A plan in memory: about `bytes` of it; `release` gives it back. */
export interface PlacedPlan { pointer: number, bytes: number, release(): void }

const SUPPLY = { stirred: 0, held: 1, sealed: 2 } as const

/**
 * Padded indices of the free voxels, ascending.
 * @param plan - compiled plan
 * @returns the indices [1]
 */
export function freeVoxelsOf(plan: WalkPlan): Int32Array {
  const free = new Int32Array(plan.freeVoxels)
  let count = 0
  plan.flags.forEach((flag, p) => {
    if (flag === FLAG.free) free[count++] = p
  })
  return free
}

/**
 * Voxel behind each outer face that exchanges with the bath, by voxel and then by direction.
 * @param plan - compiled plan
 * @returns padded indices, one per face [1]
 */
export function boundaryOf(plan: WalkPlan): Int32Array {
  if (plan.supply !== 'held') return new Int32Array(0)
  const offsets = hopOffsets(plan.nx, plan.ny), faces: number[] = []
  for (const p of freeVoxelsOf(plan)) for (const offset of offsets) if (plan.flags[p + offset] === FLAG.exchange) faces.push(p)
  return Int32Array.from(faces)
}

/** Counts that a held bath draws from: start and inflow per vesicle class (independent), gaps between entering faces (exclusive). */
export function bathTables(plan: WalkPlan, faces: number): { start: CountTable[], inflow: CountTable[], gap: CountTable | null } {
  if (plan.supply !== 'held') return { start: [], inflow: [], gap: null }
  if (plan.crowding === 'exclusive') return { start: [], inflow: [], gap: gapTable(boundaryInflow(plan).perFace) }
  return {
    start: plan.vesicles.map(one => poissonTable(plan.occupancy * one.share * plan.freeVoxels)),
    inflow: plan.vesicles.map(one => poissonTable(plan.occupancy / 6 * one.share * one.mobilityFactor * faces)),
    gap: null,
  }
}

/** f64 fields of the head, in order. */
function doublesOf(plan: WalkPlan): number[] {
  const [first, second] = plan.vesicles, pair = (values: (number | null | undefined)[], missing: number) => [values[0] ?? missing, values[1] ?? missing]
  const shares = (first?.share ?? 1) + (second?.share ?? 0)
  return [
    plan.initialFill, firstOccupantChance(plan), plan.decline?.restFactor ?? 1, plan.decline?.perStep ?? 1, plan.occupancy,
    (first?.share ?? 1) / shares, boundaryInflow(plan).firstClass,
    ...pair(plan.attachProbability[0]!, 0), ...pair(plan.attachProbability[1] ?? [], 0),
    ...pair(plan.detachPerStep, 0), ...pair(plan.readyPerStep, -1),
    ...pair(plan.vesicles.map(one => one.mobilityFactor), 0), ...pair(plan.sitesPerClass.map((_, j) => stirredChance(plan, j)), 0),
  ]
}

/** i32 fields of the head that are no addresses, in order. */
function wholeNumbersOf(plan: WalkPlan, faces: number): number[] {
  return [
    SUPPLY[plan.supply], plan.supply !== 'stirred' && plan.crowding === 'exclusive' ? 1 : 0, plan.siteCount, plan.sitesPerClass.length, plan.vesicles.length,
    plan.steps, plan.sampleSteps.length, plan.histogramBinSteps, plan.histogramBins, plan.releases.length, plan.decline ? 1 : 0,
    plan.flags.length, plan.freeVoxels, faces, plan.vesicles[0]?.number ?? 0, plan.vesicles[1]?.number ?? 0, plan.nx, plan.ny, plan.nz,
  ]
}

/** Writes a table of counts; 0 where there is none. */
export function placeTable(host: KernelHost, table: CountTable | null | undefined): number {
  if (!table) return 0
  const words = new Uint32Array(2 + 256 + table.thresholds.length)
  words.set([table.first, table.thresholds.length - 1])
  words.set(table.guide, 2)
  words.set(table.thresholds, 258)
  return host.place(words)
}

/** Sites by face (6·voxel + direction), open addressing at most half full: {mask, 0}, then (face, site) pairs; −1 where empty. A dense array would be 24 bytes a voxel. */
function siteTable(plan: WalkPlan): Int32Array {
  let capacity = 4
  while (capacity < 2 * plan.siteCount) capacity *= 2
  const table = new Int32Array(2 + 2 * capacity).fill(-1), mask = capacity - 1
  table.set([mask, 0])
  for (const voxel of new Set(plan.voxelOfSite)) {
    for (let face = 6 * voxel; voxel >= 0 && face < 6 * voxel + 6; face++) {
      const site = plan.siteBehind[face]!
      if (site < 0) continue
      let slot = (Math.imul(face, 0x9E3779B1) >>> 12) & mask
      while (table[2 + 2 * slot]! >= 0) slot = (slot + 1) & mask
      table.set([face, site], 2 + 2 * slot)
    }
  }
  return table
}

/** Writes a plan into memory. */
export function placePlan(host: KernelHost, plan: WalkPlan): PlacedPlan {
  const boundary = boundaryOf(plan), tables = bathTables(plan, boundary.length), releases = plan.releases
  const addresses = [
    host.place(plan.flags), host.place(siteTable(plan)), host.place(plan.voxelOfSite), host.place(plan.classOfSite),
    host.place(plan.sampleSteps), host.place(Int32Array.from(releases, one => one.step)), host.place(Float64Array.from(releases, one => one.fraction)),
    host.place(freeVoxelsOf(plan)), host.place(boundary), host.place(hopOffsets(plan.nx, plan.ny)),
    placeTable(host, tables.start[0]), placeTable(host, tables.start[1]), placeTable(host, tables.inflow[0]), placeTable(host, tables.inflow[1]), placeTable(host, tables.gap),
    host.allocate(plan.siteCount), host.allocate(plan.siteCount), host.allocate(plan.siteCount), host.allocate(plan.flags.length),
  ]
  const doubles = doublesOf(plan), words = [...wholeNumbersOf(plan, boundary.length), ...addresses]
  const bytes = doubles.length * 8 + words.length * 4, expected = host.exports.planBytes()
  if (Math.ceil(bytes / 8) * 8 !== Math.ceil(expected / 8) * 8) throw new Error(`The kernel expects a plan of ${expected} bytes, its host writes ${bytes}.`)
  const pointer = host.allocate(bytes)
  host.doubles(pointer, doubles.length).set(doubles)
  host.words(pointer + doubles.length * 8, words.length).set(words)
  // 4 bytes a voxel for the list of free ones, 2 for flags.
  return { pointer, bytes: plan.flags.length * 6, release: () => [pointer, ...addresses].forEach(address => address !== 0 && host.release(address)) }
}

/** Plans kept in memory at a time (a person compares a few), and the bytes beyond which only the newest stays. */
const KEPT_PLANS = 4
const KEPT_BYTES = 64 * 1024 * 1024

/** The placed plans of one kernel, oldest use first; an evicted plan is placed anew when it is walked again. */
export class PlacedPlans {
  private readonly kept: { plan: WalkPlan, placed: PlacedPlan }[] = []

  constructor(private readonly host: KernelHost) {}

  /** Address of a plan, placed now if need be. */
  pointerOf(plan: WalkPlan): number {
    const known = this.kept.findIndex(one => one.plan === plan)
    const entry = known < 0 ? { plan, placed: placePlan(this.host, plan) } : this.kept.splice(known, 1)[0]!
    this.kept.push(entry)
    let bytes = this.kept.reduce((sum, one) => sum + one.placed.bytes, 0)
    while (this.kept.length > KEPT_PLANS || (this.kept.length > 1 && bytes > KEPT_BYTES)) {
      const oldest = this.kept.shift()!.placed
      bytes -= oldest.bytes
      oldest.release()
    }
    return entry.placed.pointer
  }
}
