/** First-touch tables of one kernel: built once per geometry, duration and mobility, kept while there is room, handed over to other workers. */
import type { WalkPlan } from '../shared/walk/types'
import type { KernelExports, KernelHost } from './host'

export interface TouchExports extends KernelExports {
  solveFirstTouch(plan: number, mobility: number, voxels: number, voxelCount: number, table: number): void
  sumOfTable(table: number, count: number): number
  fillAlias(table: number, count: number, sum: number, cells: number): void
}

/** Alias cells in memory, and Σ of the table: expected first touches at unit density. */
export interface TouchTable { cells: number, cellCount: number, sum: number }

/** Beyond this the table used longest ago is dropped. */
const KEPT_BYTES = 256 * 1024 * 1024
const MAGIC = 0x746F7563

/** FNV-1a over the words of what a table depends on; two of them with different starts make a key that does not collide in practice. */
function fingerprint(plan: WalkPlan, start: number): number {
  let hash = start
  const mix = (word: number) => hash = Math.imul(hash ^ word, 16777619)
  for (const word of [plan.nx, plan.ny, plan.nz, plan.steps]) mix(word)
  for (const flag of plan.flags) mix(flag)
  for (const voxel of plan.voxelOfSite) mix(voxel)
  return hash >>> 0
}

/**
 * Mobilities that need a table, each once; classes that never move have none.
 * @param plan - compiled plan
 * @returns mobility factors [1]
 */
export const mobilitiesOf = (plan: WalkPlan): number[] => [...new Set(plan.vesicles.map(one => one.mobilityFactor).filter(factor => factor > 0))]

/** Voxels in front of sites, each once, in the order of the sites. */
export const touchVoxels = (plan: WalkPlan): Int32Array => Int32Array.from(new Set(plan.voxelOfSite))

/** Bytes of the tables of a plan: eight per step, voxel in front of a site, and mobility. */
export const touchTableBytes = (plan: WalkPlan): number => 8 * plan.steps * new Set(plan.voxelOfSite).size * mobilitiesOf(plan).length

export class TouchTables {
  private readonly kept = new Map<string, TouchTable>()
  private readonly keys = new WeakMap<WalkPlan, string>()

  constructor(private readonly host: KernelHost, private readonly pointerOf: (plan: WalkPlan) => number) {}

  private keyOf(plan: WalkPlan, mobility: number): string {
    let key = this.keys.get(plan)
    if (key === undefined) this.keys.set(plan, key = `${fingerprint(plan, 2166136261)}-${fingerprint(plan, 84696351)}`)
    return `${key}-${mobility}`
  }

  private keep(key: string, table: TouchTable): TouchTable {
    this.kept.set(key, table)
    let bytes = 0
    for (const one of this.kept.values()) bytes += one.cellCount * 8
    for (const [oldKey, old] of this.kept) {
      // The two newest may belong to one plan with two mobilities.
      if (bytes <= KEPT_BYTES || this.kept.size <= 2) break
      this.kept.delete(oldKey)
      this.host.release(old.cells)
      bytes -= old.cellCount * 8
    }
    return table
  }

  private build(plan: WalkPlan, mobility: number): TouchTable {
    const exports = this.host.exports as TouchExports, voxels = touchVoxels(plan), cellCount = plan.steps * voxels.length
    const placedVoxels = this.host.place(voxels), weights = this.host.allocate(cellCount * 4), cells = this.host.allocate(cellCount * 8)
    exports.solveFirstTouch(this.pointerOf(plan), mobility, placedVoxels, voxels.length, weights)
    const sum = exports.sumOfTable(weights, cellCount)
    exports.fillAlias(weights, cellCount, sum, cells)
    this.host.release(weights)
    this.host.release(placedVoxels)
    return { cells, cellCount, sum }
  }

  /** Tables of a plan in the order of `mobilitiesOf`, built now where they are missing. */
  of(plan: WalkPlan): TouchTable[] {
    return mobilitiesOf(plan).map((mobility) => {
      const key = this.keyOf(plan, mobility), known = this.kept.get(key)
      if (known) this.kept.delete(key)
      return this.keep(key, known ?? this.build(plan, mobility))
    })
  }

  /** Sums and cells in one buffer: words {magic, tables}, then per table f64 sum and its cells. */
  export(plan: WalkPlan): ArrayBuffer | null {
    const tables = this.of(plan)
    if (tables.length === 0) return null
    const buffer = new ArrayBuffer(tables.reduce((bytes, one) => bytes + 8 + one.cellCount * 8, 8))
    new Uint32Array(buffer, 0, 2).set([MAGIC, tables.length])
    let at = 8
    for (const { cells, cellCount, sum } of tables) {
      new Float64Array(buffer, at, 1)[0] = sum
      new Uint8Array(buffer, at + 8, cellCount * 8).set(this.host.bytes(cells, cellCount * 8))
      at += 8 + cellCount * 8
    }
    return buffer
  }

  /** Takes over what `export` made for an equal plan in another kernel. */
  adopt(plan: WalkPlan, buffer: ArrayBuffer): void {
    const mobilities = mobilitiesOf(plan), cellCount = plan.steps * touchVoxels(plan).length
    const [magic, tables] = new Uint32Array(buffer, 0, 2)
    if (magic !== MAGIC || tables !== mobilities.length || buffer.byteLength !== 8 + mobilities.length * (8 + cellCount * 8))
      throw new RangeError('These tables were made for another plan.')
    mobilities.forEach((mobility, i) => {
      const key = this.keyOf(plan, mobility), at = 8 + i * (8 + cellCount * 8)
      if (this.kept.has(key)) return
      this.keep(key, { cells: this.host.place(new Uint8Array(buffer, at + 8, cellCount * 8)), cellCount, sum: new Float64Array(buffer, at, 1)[0]! })
    })
  }
}
