/** Tables kept while someone edits: by what they depend on, oldest use dropped first. */
import { ATTEMPT_TABLE_LIMIT } from '../shared/walk/attempt-size'
import type { WalkPlan } from '../shared/walk/types'
import { buildTables, type TableSet } from './attempt-tables'
import type { KernelHost } from './host'

interface Entry { key: string, set: TableSet }

/** What a set depends on besides the number of steps. */
function keyOf(plan: WalkPlan, attemptChance: number, mobility: number): string {
  const towards = plan.voxelOfSite.length > 0 ? plan.siteBehind.indexOf(0, 6 * plan.voxelOfSite[0]!) - 6 * plan.voxelOfSite[0]! : -1
  return [plan.supply, plan.nx, plan.ny, plan.nz, plan.freeVoxels, towards, attemptChance, mobility, plan.voxelOfSite.join(' ')].join('|')
}

/** A set serves a run when a fresh build for that run would make the very same one. */
const serves = (set: TableSet, steps: number) => set.steady ? set.waitSteps <= steps : set.waitSteps === steps

export class TableCache {
  private readonly entries: Entry[] = []
  /** Sets that came in so far. */
  built = 0
  /** Bytes of tables kept; the newest two stay whatever they take, since one plan may need both. */
  keptBytes = 2 * ATTEMPT_TABLE_LIMIT

  constructor(private readonly host: KernelHost) {}

  /** Finds or builds a set. */
  tablesOf(plan: WalkPlan, attemptChance: number, mobility: number): TableSet {
    const key = keyOf(plan, attemptChance, mobility)
    return this.find(key, plan.steps) ?? this.keep(key, buildTables(this.host, plan, attemptChance, mobility))
  }

  /** Takes over a set made elsewhere. */
  adopt(plan: WalkPlan, attemptChance: number, mobility: number, set: TableSet): void {
    const key = keyOf(plan, attemptChance, mobility)
    if (this.find(key, plan.steps)) this.host.release(set.pointer)
    else this.keep(key, set)
  }

  get bytes(): number {
    return this.entries.reduce((sum, entry) => sum + entry.set.bytes, 0)
  }

  private find(key: string, steps: number): TableSet | null {
    const at = this.entries.findIndex(entry => entry.key === key && serves(entry.set, steps))
    if (at < 0) return null
    const [entry] = this.entries.splice(at, 1)
    this.entries.push(entry!)
    return entry!.set
  }

  private keep(key: string, set: TableSet): TableSet {
    this.built++
    this.entries.push({ key, set })
    while (this.bytes > this.keptBytes && this.entries.length > 2) {
      const dropped = this.entries.shift()!.set
      this.host.release(dropped.pointer)
      dropped.pointer = 0
    }
    return set
  }
}
