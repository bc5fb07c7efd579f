// One step of the walk for a whole field of expectations on a padded box, four voxels at a time.

/** The field leaves through this face. */
export const FACE_OPEN: i32 = 0
/** A hop through this face is blocked: the ghost layer mirrors the outermost one. */
export const FACE_WALL: i32 = 1
/** A mirror plane through the centres of the outermost layer: the ghost layer mirrors the one before it. */
export const FACE_CENTRE: i32 = 2

/** Written by the host word by word, in this order. */
@unmanaged
export class Box {
  nx: i32
  ny: i32
  nz: i32
  lowX: i32
  highX: i32
  lowY: i32
  highY: i32
  lowZ: i32
  highZ: i32
  /** Two padded f32 fields of (nx+2)(ny+2)(nz+2) voxels and 8 spare ones. */
  current: usize
  other: usize
  /** Padded indices (i32) of voxels inside the box that are not free. */
  holes: usize
  holeCount: i32
  /** Pairs {padded index i32, share f32}: of what sits there, this share of a hop's 1/6 is given back. */
  returns: usize
  returnCount: i32
  /** Chance of moving in a step. */
  mobility: f32
  /** Rows and slabs that can differ from zero, inclusive. */
  fromY: i32
  toY: i32
  fromZ: i32
  toZ: i32
}

/** Clears both fields and lets the whole box take part. */
export function clearBox(box: Box): void {
  const bytes = <usize>((box.nx + 2) * (box.ny + 2) * (box.nz + 2) + 8) << 2
  memory.fill(box.current, 0, bytes)
  memory.fill(box.other, 0, bytes)
  box.fromY = 1
  box.toY = box.ny
  box.fromZ = 1
  box.toZ = box.nz
}

/** Lets only the neighbourhood of one voxel take part; each step widens it by one. */
export function narrowBox(box: Box, index: i32): void {
  const px = box.nx + 2
  const row = index / px
  box.fromY = box.toY = row % (box.ny + 2)
  box.fromZ = box.toZ = row / (box.ny + 2)
}

@inline
function neighbours(at: usize, row: usize, slab: usize): v128 {
  return f32x4.add(
    f32x4.add(f32x4.add(v128.load(at - 4), v128.load(at, 4)), f32x4.add(v128.load(at - row), v128.load(at + row))),
    f32x4.add(v128.load(at - slab), v128.load(at + slab)))
}

/** Sums divide by 6: multiplying by the rounded sixth would gain 3e-8 of the whole field in every step. */
function sweep(box: Box): void {
  const row = <usize>(box.nx + 2) << 2
  const slab = row * <usize>(box.ny + 2)
  const shift = box.other - box.current
  const six = f32x4.splat(6)
  const lazy = box.mobility < 1
  const move = f32x4.splat(box.mobility)
  const stay = f32x4.splat(1 - box.mobility)
  for (let z = box.fromZ; z <= box.toZ; z++) {
    let at = box.current + <usize>z * slab + <usize>box.fromY * row
    const end = at + <usize>(box.toY - box.fromY + 1) * row
    if (lazy) {
      for (; at < end; at += 16) {
        const moved = f32x4.mul(f32x4.div(neighbours(at, row, slab), six), move)
        v128.store(at + shift, f32x4.add(moved, f32x4.mul(v128.load(at), stay)))
      }
    } else {
      for (; at < end; at += 16) v128.store(at + shift, f32x4.div(neighbours(at, row, slab), six))
    }
  }
}

@inline
function ghostX(kind: i32, wall: usize, centre: usize): f32 {
  return kind == FACE_OPEN ? 0 : load<f32>(kind == FACE_WALL ? wall : centre)
}

/** `layer` is the outermost inner layer, `inward` leads to the one before it. */
function ghostLayer(kind: i32, ghost: usize, layer: usize, inward: isize, bytes: usize): void {
  if (kind == FACE_OPEN) memory.fill(ghost, 0, bytes)
  else memory.copy(ghost, kind == FACE_WALL ? layer : layer + inward, bytes)
}

function ghosts(box: Box, field: usize): void {
  const row = <usize>(box.nx + 2) << 2
  const slab = row * <usize>(box.ny + 2)
  const last = <usize>box.nx << 2
  for (let z = box.fromZ; z <= box.toZ; z++) {
    const base = field + <usize>z * slab
    for (let y = box.fromY; y <= box.toY; y++) {
      const at = base + <usize>y * row
      store<f32>(at, ghostX(box.lowX, at + 4, at + 8))
      store<f32>(at + last + 4, ghostX(box.highX, at + last, at + last - 4))
    }
    const high = base + <usize>box.ny * row
    if (box.fromY == 1) ghostLayer(box.lowY, base, base + row, row, row)
    if (box.toY == box.ny) ghostLayer(box.highY, high + row, high, -<isize>row, row)
  }
  const top = field + <usize>box.nz * slab
  if (box.fromZ == 1 && box.lowZ != FACE_OPEN) ghostLayer(box.lowZ, field, field + slab, slab, slab)
  if (box.toZ == box.nz && box.highZ != FACE_OPEN) ghostLayer(box.highZ, top + slab, top, -<isize>slab, slab)
}

/** Brings the ghost layers of the current field up to date; needed once before the first step. */
export function settle(box: Box): void {
  ghosts(box, box.current)
}

/** Takes one step: current becomes K·current. */
export function stepBox(box: Box): void {
  if (box.fromY > 1) box.fromY--
  if (box.toY < box.ny) box.toY++
  if (box.fromZ > 1) box.fromZ--
  if (box.toZ < box.nz) box.toZ++
  sweep(box)
  const from = box.current
  const to = box.other
  for (let i = 0; i < box.holeCount; i++) store<f32>(to + (<usize>load<i32>(box.holes + (<usize>i << 2)) << 2), 0)
  for (let i = 0; i < box.returnCount; i++) {
    const pair = box.returns + (<usize>i << 3)
    const at = <usize>load<i32>(pair) << 2
    const back = load<f32>(from + at) * load<f32>(pair, 4) / 6 * box.mobility
    store<f32>(to + at, load<f32>(to + at) + back)
  }
  box.current = to
  box.other = from
  ghosts(box, to)
}
