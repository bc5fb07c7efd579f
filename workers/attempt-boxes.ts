/** Boxes for the attempt sampler's solves: what the plan's lattice is made of, its mirror planes, and its cropped and folded forms. */
import { FLAG, hopOffsets } from '../shared/walk/geometry'
import type { WalkPlan } from '../shared/walk/types'

/** Face kinds as in assembly/solve-box.ts. */
export const FACE = { open: 0, wall: 1, centre: 2 } as const

/** A box with a ribbon in it. Faces are −x +x −y +y −z +z; indices are padded ones of this box. */
export interface RibbonBox {
  size: readonly [number, number, number]
  faces: number[]
  /** Voxels inside that are not free. */
  holes: number[]
  /** Voxel in front of each site, and the direction (+x −x +y −y +z −z) in which the site lies. */
  fronts: number[]
  towards: number[]
}
type Axis = 0 | 1 | 2

export function coordinatesOf(size: RibbonBox['size'], index: number): [number, number, number] {
  const px = size[0] + 2, row = Math.floor(index / px)
  return [index % px, row % (size[1] + 2), Math.floor(row / (size[1] + 2))]
}
export function indexOf(size: RibbonBox['size'], x: number, y: number, z: number): number {
  return (z * (size[1] + 2) + y) * (size[0] + 2) + x
}

/** Kind of one outer face; throws where it is not all of one kind. */
function faceKind(plan: WalkPlan, axis: Axis, coordinate: number): number {
  const size = [plan.nx, plan.ny, plan.nz] as const
  const kinds = new Set<number>(), at: [number, number, number] = [0, 0, 0], [u, v] = [0, 1, 2].filter(one => one !== axis) as [Axis, Axis]
  at[axis] = coordinate
  for (at[u] = 1; at[u] <= size[u]; at[u]++)
    for (at[v] = 1; at[v] <= size[v]; at[v]++)
      kinds.add(plan.flags[indexOf(size, ...at)] === FLAG.exchange ? FACE.open : FACE.wall)
  if (kinds.size !== 1) throw new RangeError('A face of the box is partly open: this plan is not one for attempt.')
  return [...kinds][0]!
}

function holesOf(plan: WalkPlan): number[] {
  const holes: number[] = [], { nx, ny, nz, flags } = plan
  if (plan.freeVoxels === nx * ny * nz) return holes
  for (let z = 1; z <= nz; z++)
    for (let y = 1; y <= ny; y++) {
      const row = indexOf([nx, ny, nz], 0, y, z)
      for (let p = row + 1; p <= row + nx; p++) if (flags[p] !== FLAG.free) holes.push(p)
    }
  return holes
}

/** Reads the box of a plan; throws on one that the sampler does not cover. */
export function ribbonBoxOf(plan: WalkPlan): RibbonBox {
  const size = [plan.nx, plan.ny, plan.nz] as const
  const fronts = [...plan.voxelOfSite]
  if (new Set(fronts).size !== fronts.length) throw new RangeError('A voxel lies before two sites: this plan is not one for attempt.')
  const towards = fronts.map((front, site) => [0, 1, 2, 3, 4, 5].find(d => plan.siteBehind[6 * front + d] === site) ?? -1)
  if (towards.includes(-1) || fronts.some(front => plan.flags[front] !== FLAG.free)) throw new RangeError('A site has no free voxel before it.')
  const faces = ([0, 1, 2] as const).flatMap(axis => [faceKind(plan, axis, 0), faceKind(plan, axis, size[axis] + 1)])
  return { size, faces, holes: holesOf(plan), fronts, towards }
}

/** The part of a box within a margin of its ribbon; faces that are not the box's own are open. */
export function cropBox(box: RibbonBox, margin: number): RibbonBox {
  const solid = [...box.fronts, ...box.holes].map(p => coordinatesOf(box.size, p))
  const low: number[] = [], size: number[] = [], faces: number[] = []
  for (const axis of [0, 1, 2] as const) {
    let least = Infinity, most = 0
    for (const at of solid) {
      if (at[axis] < least) least = at[axis]
      if (at[axis] > most) most = at[axis]
    }
    const from = Math.max(1, least - margin), to = Math.min(box.size[axis], most + margin)
    low.push(from - 1)
    size.push(to - from + 1)
    faces.push(from === 1 ? box.faces[2 * axis]! : FACE.open, to === box.size[axis] ? box.faces[2 * axis + 1]! : FACE.open)
  }
  const cropped = size as [number, number, number]
  const move = (p: number) => {
    const [x, y, z] = coordinatesOf(box.size, p)
    return indexOf(cropped, x - low[0]!, y - low[1]!, z - low[2]!)
  }
  return { size: cropped, faces, holes: box.holes.map(move), fronts: box.fronts.map(move), towards: box.towards }
}

/** Mirror images of a padded index; bit k of `mirror` reflects axis k. */
export function mirrored(size: RibbonBox['size'], index: number, mirror: number): number {
  const at = coordinatesOf(size, index)
  for (const axis of [0, 1, 2] as const) if (mirror & 1 << axis) at[axis] = size[axis] + 1 - at[axis]
  return indexOf(size, ...at)
}

/** Axes (as bits) whose reflection leaves faces, holes and sites as they are. */
export function mirrorAxes(box: RibbonBox): number {
  const holes = new Set(box.holes), towards = new Map(box.fronts.map((front, site) => [front, box.towards[site]!]))
  let axes = 0
  for (const axis of [0, 1, 2] as const) {
    const bit = 1 << axis
    const same = box.faces[2 * axis] === box.faces[2 * axis + 1]
      && box.holes.every(p => holes.has(mirrored(box.size, p, bit)))
      && box.fronts.every((p, site) => {
        const d = box.towards[site]!
        return towards.get(mirrored(box.size, p, bit)) === (d >> 1 === axis ? d ^ 1 : d)
      })
    if (same) axes |= bit
  }
  return axes
}

/** Share of a hop's 1/6 that is given back where the plain stencil would lose it (blocked by the plate) or should lose it (an effective attempt through a wall). */
export function returnsOf(box: RibbonBox, attemptChance: number): Map<number, number> {
  const holes = new Set(box.holes), offsets = hopOffsets(box.size[0], box.size[1]), shares = new Map<number, number>()
  const add = (p: number, share: number) => shares.set(p, (shares.get(p) ?? 0) + share)
  for (const hole of box.holes) {
    for (const offset of offsets) {
      const p = hole + offset
      const inside = coordinatesOf(box.size, p).every((value, axis) => value >= 1 && value <= box.size[axis]!)
      if (inside && !holes.has(p)) add(p, 1)
    }
  }
  box.fronts.forEach(front => add(front, -attemptChance))
  return shares
}

/** A box folded at its mirror planes: its lower half along each of `axes`. */
export function foldBox(box: RibbonBox, axes: number): { size: [number, number, number], faces: number[], fold(index: number): number, keeps(index: number): boolean } {
  const size = box.size.map((n, axis) => axes & 1 << axis ? Math.ceil(n / 2) : n) as [number, number, number]
  const faces = box.faces.map((kind, face) => {
    const axis = face >> 1, n = box.size[axis]!
    return face & 1 && axes & 1 << axis && n > 1 ? (n % 2 === 0 ? FACE.wall : FACE.centre) : kind
  })
  const folded = (index: number) => coordinatesOf(box.size, index).map((value, axis) => axes & 1 << axis ? Math.min(value, box.size[axis]! + 1 - value) : value) as [number, number, number]
  return {
    size, faces,
    fold: index => indexOf(size, ...folded(index)),
    keeps: index => coordinatesOf(box.size, index).every((value, axis) => value <= size[axis]!),
  }
}
