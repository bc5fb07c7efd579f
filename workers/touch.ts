/** Prepares first-touch walks: tables once, numbers of arrivals per run. */
import { binomialTable, poissonTable, type CountTable } from '../shared/walk/counts'
import type { WalkPlan } from '../shared/walk/types'
import type { KernelHost, WalkCall } from './host'
import { placeTable } from './placing'
import type { PreparedWalk } from './protocol'
import { runTallied } from './tally'
import { mobilitiesOf, touchTableBytes, touchVoxels, type TouchExports, type TouchTable, type TouchTables } from './touch-tables'

type WalkTouch = (...call: [...Parameters<WalkCall>, arrivals: number]) => void

/** Number of vesicles of a class that ever touch: Poisson from a bath, binomial of the exact number in a sealed terminal. */
function arrivalCounts(plan: WalkPlan, vesicleClass: number, sum: number): CountTable {
  const { number, share } = plan.vesicles[vesicleClass]!
  return number === null ? poissonTable(plan.occupancy * share * sum) : binomialTable(number, sum / plan.freeVoxels)
}

/** Writes the `Arrivals` of assembly/touch.ts; returns its address and all memory to give back. */
function placeArrivals(host: KernelHost, plan: WalkPlan, tables: TouchTable[]): { arrivals: number, addresses: number[] } {
  const mobilities = mobilitiesOf(plan), voxels = touchVoxels(plan)
  const perClass = plan.vesicles.map((one, vesicleClass) => {
    const table = tables[mobilities.indexOf(one.mobilityFactor)]
    if (!table) return { cells: 0, counts: 0, most: 0 }
    const counts = arrivalCounts(plan, vesicleClass, table.sum)
    return { cells: table.cells, counts: placeTable(host, counts), most: counts.first + counts.thresholds.length }
  })
  const most = perClass.reduce((sum, one) => sum + one.most, 0)
  const placedVoxels = host.place(voxels), heads = host.allocate(plan.steps * 8), nodes = host.allocate(most * 8)
  const arrivals = host.place(Uint32Array.of(
    perClass[0]!.cells, perClass[1]?.cells ?? 0, perClass[0]!.counts, perClass[1]?.counts ?? 0,
    placedVoxels, voxels.length, plan.steps * voxels.length, heads, nodes,
  ))
  return { arrivals, addresses: [arrivals, placedVoxels, heads, nodes, ...perClass.map(one => one.counts).filter(address => address !== 0)] }
}

/**
 * A first-touch walk. Tables are built by the first run or export, unless they were adopted before.
 * @param host - kernel
 * @param plan - independent vesicles on a lattice
 * @param tables - tables of this kernel
 * @param pointerOf - address of a plan in the kernel's memory
 * @returns the walk; exact, so its landing error is 0
 */
export function prepareTouch(host: KernelHost, plan: WalkPlan, tables: TouchTables, pointerOf: (plan: WalkPlan) => number): PreparedWalk {
  const { walkTouch } = host.exports as TouchExports & { walkTouch: WalkTouch }
  return {
    algorithm: 'touch', landingError: 0, tableBytes: touchTableBytes(plan),
    exportTables: () => tables.export(plan),
    adoptTables: buffer => tables.adopt(plan, buffer),
    run(low, high, from, to) {
      const { arrivals, addresses } = placeArrivals(host, plan, tables.of(plan))
      const block = runTallied(host, plan, from, to, tally => walkTouch(pointerOf(plan), tally, low, high, from, to, arrivals))
      for (const address of addresses) host.release(address)
      return block
    },
  }
}
