/** Voxel boxes: where a ribbon's sites sit, which voxels are free, what lies beyond the edge. */
import type { Scenario } from '../schemas/scenario'

export const FLAG = { free: 0, reflecting: 1, sites: 2, exchange: 3, taken: 4 } as const

/** A padded voxel box; see `WalkPlan` for the indexing. */
export interface Box {
  nx: number
  ny: number
  nz: number
  flags: Uint8Array
  siteBehind: Int32Array
  voxelOfSite: Int32Array
  freeVoxels: number
}
/** A plate of columns × rows sites whose first column, row and layer (inner voxels, from 0) are given. One face: its sites lie in the wall below layer 0. Two faces: the plate fills layer `z`. */
export interface Placing { columns: number, rows: number, faces: 1 | 2, x: number, y: number, z: number }

/**
 * Steps of index for a hop of direction d: +x −x +y −y +z −z.
 * @param nx - inner voxels along x [count]
 * @param ny - inner voxels along y [count]
 * @returns differences of padded indices, one per direction [1]
 */
export function hopOffsets(nx: number, ny: number): Int32Array {
  const row = nx + 2, layer = row * (ny + 2)
  return Int32Array.of(1, -1, row, -row, layer, -layer)
}

/** Flags of an empty padded box: free inside, `outer` beyond every face except the wall below layer 0, which reflects where `wall` is true. */
function emptyBox(nx: number, ny: number, nz: number, outer: number, wall: boolean): Uint8Array {
  const px = nx + 2, py = ny + 2, pz = nz + 2
  const flags = new Uint8Array(px * py * pz).fill(outer)
  if (wall) flags.fill(FLAG.reflecting, 0, px * py)
  for (let z = 1; z <= nz; z++)
    for (let y = 1; y <= ny; y++) flags.fill(FLAG.free, (z * py + y) * px + 1, (z * py + y) * px + 1 + nx)
  return flags
}

/**
 * Puts a plate's sites into a box. Sites are numbered row by row, face by face; face 0 looks up (+z), face 1 down.
 * @param size - inner voxels per axis [count]
 * @param placing - plate and where it stands [count]
 * @param supply - `held`: the faces of the box exchange with the bath (a plate on a wall keeps its wall); `sealed`: all walls reflect
 * @returns the box
 * @throws RangeError when the plate does not fit
 */
export function plateInBox(size: readonly [number, number, number], placing: Placing, supply: 'held' | 'sealed'): Box {
  const [nx, ny, nz] = size, { columns, rows, faces, x, y, z } = placing
  if (x < 0 || y < 0 || z < 0 || x + columns > nx || y + rows > ny || z >= nz)
    throw new RangeError(`A ribbon of ${columns} × ${rows} sites does not fit in ${nx} × ${ny} × ${nz} voxels.`)
  if (faces === 2 && (z < 1 || z > nz - 2))
    throw new RangeError(`A plate with two faces needs a free voxel on both sides; the terminal is ${nz} voxels deep.`)
  const flags = emptyBox(nx, ny, nz, supply === 'held' ? FLAG.exchange : FLAG.reflecting, faces === 1)
  const siteBehind = new Int32Array(flags.length * 6).fill(-1)
  const perFace = rows * columns
  const voxelOfSite = new Int32Array(perFace * faces)
  const px = nx + 2, layer = px * (ny + 2)
  for (let i = 0; i < perFace; i++) {
    const column = (y + 1 + Math.floor(i / columns)) * px + x + 1 + i % columns
    const plate = column + (faces === 1 ? 0 : z + 1) * layer
    flags[plate] = FLAG.sites
    voxelOfSite[i] = plate + layer
    siteBehind[6 * (plate + layer) + 5] = i
    if (faces === 2) {
      voxelOfSite[perFace + i] = plate - layer
      siteBehind[6 * (plate - layer) + 4] = perFace + i
    }
  }
  return { nx, ny, nz, flags, siteBehind, voxelOfSite, freeVoxels: nx * ny * nz - (faces === 2 ? perFace : 0) }
}

/**
 * Voxels an axis of the box that a scenario asks for: held = ribbon + margins; sealed = size over spacing, to whole voxels.
 * @param scenario - a walk on the lattice (not stirred)
 * @returns inner voxels per axis [count]
 */
export function boxSize(scenario: Scenario): [number, number, number] {
  const { ribbon, reservoir, medium } = scenario
  if (reservoir.supply === 'stirred') return [0, 0, 0]
  if (reservoir.supply === 'sealed') {
    const voxels = (sizeUm: number) => Math.max(1, Math.round(sizeUm / (medium.spacingNm / 1000)))
    return [voxels(reservoir.sizeUm[0]), voxels(reservoir.sizeUm[1]), voxels(reservoir.sizeUm[2])]
  }
  const margin = reservoir.marginSites
  if (ribbon.shape === 'isolated') return [2 * margin + 1, 2 * margin + 1, margin + 1]
  return [ribbon.columns + 2 * margin, ribbon.rows + 2 * margin, ribbon.faces === 1 ? margin + 1 : 2 * margin + 1]
}

/**
 * The box of a scenario whose supply is `held` or `sealed`; the ribbon stands in the middle (start at floor((n − size)/2)).
 * @param scenario - scenario document
 * @returns the box
 * @throws RangeError when the ribbon does not fit in the sealed terminal
 */
export function boxOf(scenario: Scenario): Box {
  const { ribbon, reservoir } = scenario
  if (reservoir.supply === 'stirred') throw new RangeError('boxOf: a stirred supply has no lattice')
  const size = boxSize(scenario)
  const plate = ribbon.shape === 'isolated' ? { rows: 1, columns: 1, faces: 1 as const } : ribbon
  return plateInBox(size, {
    columns: plate.columns, rows: plate.rows, faces: plate.faces,
    x: Math.floor((size[0] - plate.columns) / 2), y: Math.floor((size[1] - plate.rows) / 2),
    z: plate.faces === 1 ? 0 : Math.floor((size[2] - 1) / 2),
  }, reservoir.supply)
}
