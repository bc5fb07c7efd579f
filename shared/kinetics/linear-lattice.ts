/** Densities on a plan's voxels under the lattice walk: compact neighbour lists, folded by the mirror planes that the geometry has. */
import type { WalkPlan } from '../walk/types'

/** Free voxels after folding. Index `size` is the bath. */
export interface LinearLattice {
  size: number
  /** Where mass at a voxel comes from in a step, 6 an entry: a neighbour, itself (blocked hop), or the bath. */
  neighbours: Int32Array
  /** Voxels that an entry stands for [1]. */
  weight: Float64Array
  /** Entry in front of the site. */
  site: number
  /** Free voxels in all [1]. */
  freeVoxels: number
}

type Reflection = (x: number, y: number, z: number) => [number, number, number]

/** Mirror planes and the diagonal that leave the padded box as a whole in place. */
function reflections(plan: WalkPlan): Reflection[] {
  const { nx, ny } = plan
  const all: Reflection[] = [(x, y, z) => [nx + 1 - x, y, z], (x, y, z) => [x, ny + 1 - y, z]]
  if (nx === ny) all.push((x, y, z) => [y, x, z])
  return all
}

/** Whether a reflection leaves flags and the site's voxel in place. */
function keepsPlan(plan: WalkPlan, reflect: Reflection): boolean {
  const px = plan.nx + 2, py = plan.ny + 2, site = plan.voxelOfSite[0]!
  for (let p = 0, z = 0; z < plan.nz + 2; z++)
    for (let y = 0; y < py; y++)
      for (let x = 0; x < px; x++, p++) {
        const [u, v, w] = reflect(x, y, z)
        const q = (w * py + v) * px + u
        if (plan.flags[p] !== plan.flags[q] || (p === site && q !== site)) return false
      }
  return true
}

/** Smallest padded index among the images of each voxel. */
function representatives(plan: WalkPlan): Int32Array {
  const px = plan.nx + 2, py = plan.ny + 2
  const kept = reflections(plan).filter(reflect => keepsPlan(plan, reflect))
  const smallest = Int32Array.from(plan.flags, (_flag, p) => p)
  // Each reflection is its own inverse; repeated passes reach the whole orbit (at most 8 images, 3 passes).
  for (let pass = 0; pass < 3; pass++)
    for (const reflect of kept)
      for (let p = 0, z = 0; z < plan.nz + 2; z++)
        for (let y = 0; y < py; y++)
          for (let x = 0; x < px; x++, p++) {
            const [u, v, w] = reflect(x, y, z)
            const q = (w * py + v) * px + u
            if (smallest[q]! < smallest[p]!) smallest[p] = smallest[q]!
          }
  return smallest
}

/**
 * Compact lattice of a plan with one site. Flags: 0 free, 3 bath; every other voxel blocks, and a blocked hop stays where it is.
 * @param plan - compiled plan of an isolated site, held or sealed
 * @returns neighbour lists over folded voxels [1]
 * @throws RangeError when the plan has no lattice or more than one site
 */
export function linearLattice(plan: WalkPlan): LinearLattice {
  if (plan.siteCount !== 1 || plan.flags.length === 0) throw new RangeError('linearLattice: one site on a lattice is wanted')
  const rep = representatives(plan)
  const entry = new Int32Array(plan.flags.length).fill(-1)
  const own: number[] = []
  for (let p = 0; p < rep.length; p++)
    if (plan.flags[p] === 0 && rep[p] === p) entry[p] = own.push(p) - 1
  const size = own.length, weight = new Float64Array(size)
  for (let p = 0; p < rep.length; p++)
    if (plan.flags[p] === 0) weight[entry[rep[p]!]!]!++
  const row = plan.nx + 2, layer = row * (plan.ny + 2)
  const hops = [1, -1, row, -row, layer, -layer]
  const neighbours = new Int32Array(6 * size)
  own.forEach((p, i) => hops.forEach((hop, d) => {
    const flag = plan.flags[p + hop]
    neighbours[6 * i + d] = flag === 0 ? entry[rep[p + hop]!]! : flag === 3 ? size : i
  }))
  return { size, neighbours, weight, site: entry[rep[plan.voxelOfSite[0]!]!]!, freeVoxels: plan.freeVoxels }
}

/**
 * One step of the density: every voxel takes a sixth from each neighbour; the site removes its share of the hops into it.
 * @param lattice - compact lattice
 * @param from - densities before the step; entry `size` holds the bath [vesicles a voxel]
 * @param to - densities after the step [vesicles a voxel]
 * @param mobility - chance that a vesicle moves in a step [1]
 * @param attach - chance that a hop into the site attaches [1]
 * @returns vesicles attached in the step (always-empty site) [1]
 */
export function stepDensity(lattice: LinearLattice, from: Float64Array, to: Float64Array, mobility: number, attach: number): number {
  const { size, neighbours, site } = lattice
  const taken = mobility * attach * from[site]! / 6
  for (let i = 0, k = 0; i < size; i++, k += 6) {
    const mean = (from[neighbours[k]!]! + from[neighbours[k + 1]!]! + from[neighbours[k + 2]!]!
      + from[neighbours[k + 3]!]! + from[neighbours[k + 4]!]! + from[neighbours[k + 5]!]!) / 6
    to[i] = mobility === 1 ? mean : (1 - mobility) * from[i]! + mobility * mean
  }
  to[size] = from[size]!
  to[site]! -= taken
  return taken
}
