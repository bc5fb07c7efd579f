/**
 * First-touch table: how much untouched density arrives in each voxel in front of a site at each step, by one linear lattice solve.
 * Density 1 in every free voxel at the start (and always 1 beyond an exchanging face); what arrives in front of a site is noted and taken away.
 * A box that is its own mirror image is solved on one half per such axis: the ghost beyond the last kept voxel h of n is a copy of voxel n - h, same bits.
 * f32x4 sweep over rows; division by 6, never times 1/6 (6·fl(1/6) = 1 + 3e-8 would drift over thousands of steps).
 */
import { Plan } from './plan'

/** Cells of the solver's rows: 4 left of the first inner voxel (its ghost is the last of them), inner voxels to a multiple of 4, 4 right of them. */
let blocks: i32 = 0
let rowCells: i32 = 0
let rows: i32 = 0
let layers: i32 = 0
/** Voxels kept per axis: all, or the first half of a mirrored axis. */
let keptX: i32 = 0
let keptY: i32 = 0
let keptZ: i32 = 0
/** Cell 0 lies in a corner that no sweep reads; it holds the bath's density for ghosts that a sweep overwrites. */
const BATH_CELL: u32 = 0

@inline
function cellOf(x: i32, y: i32, z: i32): u32 {
  return <u32>((z * rows + y) * rowCells + x + 3)
}

/** Pairs or triples of u32 in memory that grows. */
@unmanaged
class WordList {
  words: usize
  length: i32
  capacity: i32
}

function newList(): WordList {
  const list = changetype<WordList>(heap.alloc(offsetof<WordList>()))
  list.capacity = 256
  list.length = 0
  list.words = heap.alloc(1024)
  return list
}

function push(list: WordList, word: u32): void {
  if (list.length == list.capacity) {
    list.capacity *= 2
    list.words = heap.realloc(list.words, <usize>list.capacity << 2)
  }
  store<u32>(list.words + (<usize>list.length << 2), word)
  list.length++
}

function dropList(list: WordList): void {
  heap.free(list.words)
  heap.free(changetype<usize>(list))
}

@inline
function flagAt(plan: Plan, x: i32, y: i32, z: i32): u8 {
  return load<u8>(plan.flags + <usize>((z * (plan.ny + 2) + y) * (plan.nx + 2) + x))
}

@inline
function foldedAt(x: i32, n: i32, kept: i32): i32 {
  return x > kept ? n + 1 - x : x
}

/** Voxels to keep along an axis: half of them when flags and the voxels in front of sites are their own mirror image, else all. */
function keptOf(plan: Plan, axis: i32, voxels: usize, voxelCount: i32): i32 {
  const px = plan.nx + 2, py = plan.ny + 2, pz = plan.nz + 2, n = axis == 0 ? plan.nx : axis == 1 ? plan.ny : plan.nz
  if (n < 3) return n
  const marks = heap.alloc(plan.cellCount)
  memory.copy(marks, plan.flags, plan.cellCount)
  for (let i = 0; i < voxelCount; i++) store<u8>(marks + <usize>load<i32>(voxels + (<usize>i << 2)), 255)
  let same = true
  for (let z = 0, p = 0; z < pz && same; z++) {
    for (let y = 0; y < py; y++) {
      for (let x = 0; x < px; x++, p++) {
        const q = axis == 0 ? p + n + 1 - 2 * x : axis == 1 ? p + (n + 1 - 2 * y) * px : p + (n + 1 - 2 * z) * px * py
        if (load<u8>(marks + <usize>p) != load<u8>(marks + <usize>q)) same = false
      }
    }
  }
  heap.free(marks)
  return same ? (n + 1) >> 1 : n
}

/** A ghost row beyond a y or z face or a mirror plane: a copy of another row (pushed to `mirrors`), or the bath for good. */
function ghostRow(plan: Plan, buffers: usize, bytes: usize, y: i32, z: i32, fromY: i32, fromZ: i32, folded: bool, mirrors: WordList): void {
  if (folded || flagAt(plan, 1, y, z) != 3) {
    push(mirrors, cellOf(1, y, z))
    push(mirrors, cellOf(1, fromY, fromZ))
    return
  }
  const row = buffers + (<usize>cellOf(1, y, z) << 2)
  for (let i = 0; i < blocks * 4; i++) {
    store<f32>(row + (<usize>i << 2), 1)
    store<f32>(row + bytes + (<usize>i << 2), 1)
  }
}

/** Ghost cells beyond the x faces of a row: (cell, source) pairs. */
function ghostEnds(plan: Plan, buffers: usize, bytes: usize, y: i32, z: i32, ends: WordList): void {
  const left = cellOf(0, y, z), right = cellOf(keptX + 1, y, z)
  if (flagAt(plan, 0, y, z) == 3) {
    store<f32>(buffers + (<usize>left << 2), 1)
    store<f32>(buffers + bytes + (<usize>left << 2), 1)
  }
  else {
    push(ends, left)
    push(ends, cellOf(1, y, z))
  }
  push(ends, right)
  push(ends, keptX < plan.nx ? cellOf(plan.nx - keptX, y, z) : flagAt(plan, plan.nx + 1, y, z) == 3 ? BATH_CELL : cellOf(plan.nx, y, z))
}

/** Inner voxels that are no free ones (a plate), and their free neighbours with the number of blocked faces. */
function inside(plan: Plan, buffers: usize, plate: WordList, edges: WordList): void {
  for (let z = 1; z <= keptZ; z++) {
    for (let y = 1; y <= keptY; y++) {
      for (let x = 1; x <= keptX; x++) {
        if (flagAt(plan, x, y, z) != 0) {
          push(plate, cellOf(x, y, z))
          continue
        }
        store<f32>(buffers + (<usize>cellOf(x, y, z) << 2), 1)
        let blocked: u32 = 0
        if (x > 1 && flagAt(plan, x - 1, y, z) != 0) blocked++
        if (x < plan.nx && flagAt(plan, x + 1, y, z) != 0) blocked++
        if (y > 1 && flagAt(plan, x, y - 1, z) != 0) blocked++
        if (y < plan.ny && flagAt(plan, x, y + 1, z) != 0) blocked++
        if (z > 1 && flagAt(plan, x, y, z - 1) != 0) blocked++
        if (z < plan.nz && flagAt(plan, x, y, z + 1) != 0) blocked++
        if (blocked == 0) continue
        push(edges, cellOf(x, y, z))
        push(edges, blocked)
      }
    }
  }
}

function refreshGhosts(old: usize, mirrors: WordList, ends: WordList): void {
  for (let i = 0; i < mirrors.length; i += 2) {
    const pair = mirrors.words + (<usize>i << 2)
    const to = old + (<usize>load<u32>(pair) << 2), source = old + (<usize>load<u32>(pair, 4) << 2)
    for (let k: usize = 0; k < <usize>blocks << 4; k += 16) v128.store(to + k, v128.load(source + k))
  }
  for (let pair = ends.words, end = ends.words + (<usize>ends.length << 2); pair < end; pair += 8)
    store<f32>(old + (<usize>load<u32>(pair) << 2), load<f32>(old + (<usize>load<u32>(pair, 4) << 2)))
}

@inline
function meanOfNeighbours(at: usize, row: usize, layer: usize, six: v128): v128 {
  return f32x4.div(f32x4.add(
    f32x4.add(f32x4.add(v128.load(at - 4), v128.load(at + 4)), f32x4.add(v128.load(at - row), v128.load(at + row))),
    f32x4.add(v128.load(at - layer), v128.load(at + layer)),
  ), six)
}

/** One step of the density: new = (sum of the six neighbours) / 6. */
function sweep(old: usize, fresh: usize): void {
  const row = <usize>rowCells << 2, layer = row * rows, six = f32x4.splat(6), across = <usize>blocks << 4
  for (let z = 1; z <= keptZ; z++) {
    for (let y = 1; y <= keptY; y++) {
      const start = <usize>cellOf(1, y, z) << 2
      let to = fresh + start
      for (let at = old + start, end = at + across; at < end; at += 16, to += 16) v128.store(to, meanOfNeighbours(at, row, layer, six))
    }
  }
}

/** The same for a class that moves with probability m: new = own (1 - m) + m (sum of the six neighbours) / 6. */
function sweepLazy(old: usize, fresh: usize, mobility: f32): void {
  const row = <usize>rowCells << 2, layer = row * rows, six = f32x4.splat(6), across = <usize>blocks << 4
  const moving = f32x4.splat(mobility), staying = f32x4.splat(1 - mobility)
  for (let z = 1; z <= keptZ; z++) {
    for (let y = 1; y <= keptY; y++) {
      const start = <usize>cellOf(1, y, z) << 2
      let to = fresh + start
      for (let at = old + start, end = at + across; at < end; at += 16, to += 16)
        v128.store(to, f32x4.add(f32x4.mul(v128.load(at), staying), f32x4.mul(meanOfNeighbours(at, row, layer, six), moving)))
    }
  }
}

/** Moves what has arrived in front of the sites into the table's row. Two voxels may share a cell of the folded box: note all, then clear. */
function harvest(fresh: usize, cells: usize, count: i32, row: usize): void {
  for (let i = 0; i < count; i++) store<f32>(row + (<usize>i << 2), load<f32>(fresh + (<usize>load<u32>(cells + (<usize>i << 2)) << 2)))
  for (let i = 0; i < count; i++) store<f32>(fresh + (<usize>load<u32>(cells + (<usize>i << 2)) << 2), 0)
}

/** Solves for `steps` steps; `table` takes f32[steps][voxelCount] for the padded voxels at `voxels`. */
export function solveFirstTouch(plan: Plan, mobility: f64, voxels: usize, voxelCount: i32, table: usize): void {
  keptX = keptOf(plan, 0, voxels, voxelCount)
  keptY = keptOf(plan, 1, voxels, voxelCount)
  keptZ = keptOf(plan, 2, voxels, voxelCount)
  blocks = (keptX + 3) >> 2
  rowCells = blocks * 4 + 8
  rows = keptY + 2
  layers = keptZ + 2
  const bytes = <usize>(rowCells * rows * layers + 4) << 2
  const buffers = heap.alloc(bytes * 2), mirrors = newList(), ends = newList(), plate = newList(), edges = newList(), arrivals = newList()
  memory.fill(buffers, 0, bytes * 2)
  store<f32>(buffers, 1)
  store<f32>(buffers + bytes, 1)
  const foldedY = keptY < plan.ny, foldedZ = keptZ < plan.nz
  for (let z = 1; z <= keptZ; z++) {
    ghostRow(plan, buffers, bytes, 0, z, 1, z, false, mirrors)
    ghostRow(plan, buffers, bytes, keptY + 1, z, foldedY ? plan.ny - keptY : plan.ny, z, foldedY, mirrors)
    for (let y = 1; y <= keptY; y++) ghostEnds(plan, buffers, bytes, y, z, ends)
  }
  for (let y = 1; y <= keptY; y++) {
    ghostRow(plan, buffers, bytes, y, 0, y, 1, false, mirrors)
    ghostRow(plan, buffers, bytes, y, keptZ + 1, y, foldedZ ? plan.nz - keptZ : plan.nz, foldedZ, mirrors)
  }
  inside(plan, buffers, plate, edges)
  for (let i = 0; i < voxelCount; i++) {
    const p = load<i32>(voxels + (<usize>i << 2)), px = plan.nx + 2, py = plan.ny + 2
    push(arrivals, cellOf(foldedAt(p % px, plan.nx, keptX), foldedAt(p / px % py, plan.ny, keptY), foldedAt(p / px / py, plan.nz, keptZ)))
  }
  march(plan, <f32>mobility, buffers, bytes, mirrors, ends, plate, edges, arrivals, table)
  dropList(mirrors)
  dropList(ends)
  dropList(plate)
  dropList(edges)
  dropList(arrivals)
  heap.free(buffers)
}

function march(
  plan: Plan, mobility: f32, buffers: usize, bytes: usize,
  mirrors: WordList, ends: WordList, plate: WordList, edges: WordList, arrivals: WordList, table: usize,
): void {
  let old = buffers, fresh = buffers + bytes, row = table
  const rowBytes = <usize>arrivals.length << 2
  harvest(old, arrivals.words, arrivals.length, row)
  for (let n = 1; n < plan.steps; n++) {
    refreshGhosts(old, mirrors, ends)
    if (mobility < 1) sweepLazy(old, fresh, mobility)
    else sweep(old, fresh)
    for (let i = 0; i < edges.length; i += 2) {
      const cell = <usize>load<u32>(edges.words + (<usize>i << 2)) << 2
      store<f32>(fresh + cell, load<f32>(fresh + cell) + mobility * (<f32>load<u32>(edges.words + (<usize>i << 2), 4) * load<f32>(old + cell) / 6))
    }
    for (let i = 0; i < plate.length; i++) store<f32>(fresh + (<usize>load<u32>(plate.words + (<usize>i << 2)) << 2), 0)
    row += rowBytes
    harvest(fresh, arrivals.words, arrivals.length, row)
    const swap = old
    old = fresh
    fresh = swap
  }
}
