/** The free vesicles of one replicate in the plain walk. */
import { boundaryInflow } from '../../shared/walk/chances'
import { drawCount, GAP_CAP, type CountTable } from '../../shared/walk/counts'
import { FLAG, hopOffsets } from '../../shared/walk/geometry'
import type { Stream } from '../../shared/walk/streams'
import type { WalkPlan } from '../../shared/walk/types'
import { bathTables, boundaryOf, freeVoxelsOf } from '../placing'
import type { Sites } from './sites'

/** What does not change between replicates. */
export interface Surroundings { free: Int32Array, boundary: Int32Array, offsets: Int32Array, tables: { start: CountTable[], inflow: CountTable[], gap: CountTable | null } }

export function surroundingsOf(plan: WalkPlan): Surroundings {
  const boundary = boundaryOf(plan)
  return { free: freeVoxelsOf(plan), boundary, offsets: hopOffsets(plan.nx, plan.ny), tables: bathTables(plan, boundary.length) }
}

export class Vesicles {
  /** Padded voxel of each free vesicle, per class. */
  readonly lists: number[][]
  private readonly cells: Uint8Array
  private readonly exclusive: boolean

  constructor(private readonly plan: WalkPlan, private readonly around: Surroundings, private readonly stream: Stream) {
    this.exclusive = plan.crowding === 'exclusive'
    this.cells = plan.flags.slice()
    this.lists = plan.vesicles.map(() => [])
    if (this.exclusive) this.placeExclusive()
    else this.placeIndependent()
  }

  enter(vesicleClass: number, voxel: number): void {
    this.lists[vesicleClass]!.push(voxel)
    if (this.exclusive) this.cells[voxel] = FLAG.taken
  }

  /** Under exclusion: someone stands here. */
  isTaken(voxel: number): boolean {
    return this.exclusive && this.cells[voxel] !== FLAG.free
  }

  private anyFreeVoxel(): number {
    return this.around.free[this.stream.below(this.around.free.length)]!
  }

  private placeIndependent(): void {
    this.plan.vesicles.forEach(({ number }, vesicleClass) => {
      const count = number ?? drawCount(this.around.tables.start[vesicleClass]!, this.stream)
      for (let i = 0; i < count; i++) this.enter(vesicleClass, this.anyFreeVoxel())
    })
  }

  private placeExclusive(): void {
    if (this.plan.supply === 'held') {
      const [first, second] = this.plan.vesicles
      const firstShare = first!.share / (first!.share + (second?.share ?? 0))
      for (const voxel of this.around.free)
        if (this.stream.chance(this.plan.occupancy)) this.enter(!second || this.stream.chance(firstShare) ? 0 : 1, voxel)
      return
    }
    this.plan.vesicles.forEach(({ number }, vesicleClass) => {
      for (let i = 0; i < number!; i++) {
        let voxel = this.anyFreeVoxel()
        while (this.isTaken(voxel)) voxel = this.anyFreeVoxel()
        this.enter(vesicleClass, voxel)
      }
    })
  }

  /** One hop attempt; true when the vesicle is gone from the list (attached or left). */
  private hop(list: number[], i: number, vesicleClass: number, sites: Sites, n: number): boolean {
    const voxel = list[i]!, direction = Math.floor(this.stream.next() * 6 / 4294967296), target = voxel + this.around.offsets[direction]!
    const flag = this.cells[target]!
    if (flag === FLAG.free) {
      list[i] = target
      if (this.exclusive) {
        this.cells[voxel] = FLAG.free
        this.cells[target] = FLAG.taken
      }
      return false
    }
    if (flag === FLAG.sites) {
      const site = sites.sites[this.plan.siteBehind[6 * voxel + direction]!]
      if (site?.state !== 'empty' || !this.stream.chance(this.plan.attachProbability[site.siteClass]![vesicleClass]! * sites.factor)) return false
      sites.attach(site, vesicleClass, n)
      return true
    }
    return flag === FLAG.exchange && (!this.exclusive || this.stream.chance(1 - this.plan.occupancy))
  }

  /** Moves every vesicle once, in list order; the last of the list takes the place of one that is gone and is moved next. */
  move(sites: Sites, n: number): void {
    this.lists.forEach((list, vesicleClass) => {
      const { mobilityFactor } = this.plan.vesicles[vesicleClass]!
      if (mobilityFactor <= 0) return
      let i = 0
      while (i < list.length) {
        if (!this.stream.chance(mobilityFactor)) {
          i++
          continue
        }
        const voxel = list[i]!
        if (!this.hop(list, i, vesicleClass, sites, n)) {
          i++
          continue
        }
        if (this.exclusive) this.cells[voxel] = FLAG.free
        const last = list.pop()!
        if (i < list.length) list[i] = last
      }
    })
  }

  /** Vesicles that enter from a held bath during the step. */
  letIn(): void {
    const { boundary, tables } = this.around
    if (boundary.length === 0) return
    if (this.exclusive) this.letInExclusive(tables.gap!)
    else this.plan.vesicles.forEach(({ mobilityFactor }, vesicleClass) => {
      if (mobilityFactor <= 0) return
      for (let i = drawCount(tables.inflow[vesicleClass]!, this.stream); i > 0; i--) this.enter(vesicleClass, boundary[this.stream.below(boundary.length)]!)
    })
  }

  private letInExclusive(gaps: CountTable): void {
    const { boundary } = this.around
    for (let face = 0; face < boundary.length;) {
      const gap = drawCount(gaps, this.stream)
      face += gap
      if (gap === GAP_CAP) continue
      if (face >= boundary.length) return
      const voxel = boundary[face++]!
      if (!this.isTaken(voxel)) this.enter(this.plan.vesicles.length === 1 || this.stream.chance(boundaryInflow(this.plan).firstClass) ? 0 : 1, voxel)
    }
  }
}
