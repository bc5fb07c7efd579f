/**
 * Free vesicles of one replicate: a list of voxels per class, swept in list order, class 0 first.
 * A vesicle that attaches or leaves is replaced by the last of its list, which is still moved in this step: each moves exactly once.
 */
import { CountTable, Plan } from './plan'
import { below, chance, drawCount, next, s0, s1, s2, s3, storeState } from './rng'
import { attachAt, EMPTY, factor, stateOfSite } from './sites'

const FREE: u8 = 0
const REFLECTING: u8 = 1
const SITES: u8 = 2
const TAKEN: u8 = 4
/** Set in the flags of faces with sites and of the bath alone: the one branch of the hot loops; blocked hops would be mispredicted too often. */
const RARE: u8 = 2
/** A draw of this size from the gap table means no entry within as many faces. */
const GAP_CAP: i32 = 512

let list0: usize = 0
let list1: usize = 0
let capacity0: i32 = 0
let capacity1: i32 = 0
let count0: i32 = 0
let count1: i32 = 0

function listOf(vesicleClass: i32): usize {
  return vesicleClass == 0 ? list0 : list1
}

function countOf(vesicleClass: i32): i32 {
  return vesicleClass == 0 ? count0 : count1
}

function setCount(vesicleClass: i32, count: i32): void {
  if (vesicleClass == 0) count0 = count
  else count1 = count
}

/** Appends a vesicle; under exclusion its voxel is marked as taken. */
export function enter(plan: Plan, vesicleClass: i32, voxel: i32): void {
  if (vesicleClass == 0) {
    if (count0 == capacity0) {
      capacity0 = max(1024, capacity0 * 2)
      list0 = list0 == 0 ? heap.alloc(<usize>capacity0 << 2) : heap.realloc(list0, <usize>capacity0 << 2)
    }
    store<i32>(list0 + (<usize>count0 << 2), voxel)
    count0++
  }
  else {
    if (count1 == capacity1) {
      capacity1 = max(1024, capacity1 * 2)
      list1 = list1 == 0 ? heap.alloc(<usize>capacity1 << 2) : heap.realloc(list1, <usize>capacity1 << 2)
    }
    store<i32>(list1 + (<usize>count1 << 2), voxel)
    count1++
  }
  if (plan.exclusive != 0) store<u8>(plan.cells + voxel, TAKEN)
}

/** Free vesicles of a class. */
export function freeVesicles(vesicleClass: i32): i32 {
  return countOf(vesicleClass)
}

/** Empties both lists. */
export function clearVesicles(): void {
  count0 = count1 = 0
}

@inline
function randomFreeVoxel(plan: Plan): i32 {
  return load<i32>(plan.freeVoxels + (<usize>below(plan.freeCount) << 2))
}

function placeExclusive(plan: Plan): void {
  memory.copy(plan.cells, plan.flags, plan.cellCount)
  if (plan.supply == 1) {
    for (let i = 0; i < plan.freeCount; i++) {
      if (!chance(plan.occupancy)) continue
      enter(plan, plan.vesicleClasses == 1 || chance(plan.firstShare) ? 0 : 1, load<i32>(plan.freeVoxels + (<usize>i << 2)))
    }
    return
  }
  for (let vesicleClass = 0; vesicleClass < plan.vesicleClasses; vesicleClass++) {
    for (let i = vesicleClass == 0 ? plan.number0 : plan.number1; i > 0; i--) {
      let voxel = randomFreeVoxel(plan)
      while (load<u8>(plan.cells + voxel) != FREE) voxel = randomFreeVoxel(plan)
      enter(plan, vesicleClass, voxel)
    }
  }
}

/** Vesicles at the start: uniform; a held bath has a Poisson number (independent) or Bernoulli voxels (exclusive), a sealed terminal its exact number. */
export function placeVesicles(plan: Plan): void {
  clearVesicles()
  if (plan.exclusive != 0) {
    placeExclusive(plan)
    return
  }
  for (let vesicleClass = 0; vesicleClass < plan.vesicleClasses; vesicleClass++) {
    let count = vesicleClass == 0 ? plan.number0 : plan.number1
    if (plan.supply == 1) count = drawCount(changetype<CountTable>(vesicleClass == 0 ? plan.start0 : plan.start1))
    for (let i = 0; i < count; i++) enter(plan, vesicleClass, randomFreeVoxel(plan))
  }
}

/** Site behind a face of a voxel, or -1: open addressing in (face, site) pairs, as workers/placing.ts lays them. */
function siteBehind(plan: Plan, face: i32): i32 {
  const table = plan.siteBehind, mask = load<i32>(table)
  let slot = <i32>(<u32>(face * 0x9E3779B1) >>> 12) & mask
  let key = load<i32>(table + 8 + (<usize>slot << 3))
  while (key >= 0 && key != face) {
    slot = (slot + 1) & mask
    key = load<i32>(table + 8 + (<usize>slot << 3))
  }
  return key < 0 ? -1 : load<i32>(table + 12 + (<usize>slot << 3))
}

/** A hop onto a voxel that carries sites: true when the vesicle attaches. */
function hits(plan: Plan, voxel: i32, direction: i32, vesicleClass: i32, n: i32): bool {
  const site = siteBehind(plan, 6 * voxel + direction)
  if (site < 0 || stateOfSite(site) != EMPTY) return false
  const siteClass = <i32>load<u8>(plan.classOfSite + site)
  if (!chance(plan.attach(siteClass, vesicleClass) * factor)) return false
  attachAt(site, siteClass, vesicleClass, n)
  return true
}

/** One step of the vesicles of a class that hop every step, independent of each other. */
function moveIndependent(plan: Plan, vesicleClass: i32, n: i32): void {
  const list = listOf(vesicleClass), flags = plan.flags, offsets = plan.offsets
  let end = list + (<usize>countOf(vesicleClass) << 2), at = list
  let a = s0, b = s1, c = s2, d = s3
  while (at < end) {
    const voxel = load<i32>(at)
    const r = rotl<u32>(a + d, 7) + a, shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotl<u32>(d, 11)
    const direction = <u32>((<u64>r * 6) >> 32)
    const target = voxel + load<i32>(offsets + (<usize>direction << 2))
    const flag = load<u8>(flags + <usize>target)
    if ((flag & RARE) == 0) {
      store<i32>(at, select(target, voxel, flag == FREE))
      at += 4
      continue
    }
    storeState(a, b, c, d)
    const gone = flag != SITES || hits(plan, voxel, direction, vesicleClass, n)
    a = s0
    b = s1
    c = s2
    d = s3
    if (gone) {
      end -= 4
      store<i32>(at, load<i32>(end))
    }
    else at += 4
  }
  storeState(a, b, c, d)
  setCount(vesicleClass, <i32>((end - list) >> 2))
}

/** The same where a voxel holds one vesicle at most; a vesicle leaves into the bath with probability 1 - occupancy. */
function moveExclusive(plan: Plan, vesicleClass: i32, n: i32): void {
  const list = listOf(vesicleClass), cells = plan.cells, offsets = plan.offsets
  let end = list + (<usize>countOf(vesicleClass) << 2), at = list
  let a = s0, b = s1, c = s2, d = s3
  while (at < end) {
    const voxel = load<i32>(at)
    const r = rotl<u32>(a + d, 7) + a, shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotl<u32>(d, 11)
    const direction = <u32>((<u64>r * 6) >> 32)
    const target = voxel + load<i32>(offsets + (<usize>direction << 2))
    const flag = load<u8>(cells + <usize>target)
    if ((flag & RARE) == 0) {
      const free = flag == FREE
      store<u8>(cells + <usize>voxel, select(FREE, TAKEN, free))
      store<u8>(cells + <usize>target, select(TAKEN, flag, free))
      store<i32>(at, select(target, voxel, free))
      at += 4
      continue
    }
    storeState(a, b, c, d)
    const gone = flag == SITES ? hits(plan, voxel, direction, vesicleClass, n) : chance(1 - plan.occupancy)
    a = s0
    b = s1
    c = s2
    d = s3
    if (gone) {
      store<u8>(cells + <usize>voxel, FREE)
      end -= 4
      store<i32>(at, load<i32>(end))
    }
    else at += 4
  }
  storeState(a, b, c, d)
  setCount(vesicleClass, <i32>((end - list) >> 2))
}

/** A slower class: each vesicle first draws whether it moves at all. Both crowding rules. */
function moveLazy(plan: Plan, vesicleClass: i32, mobility: f64, n: i32): void {
  const list = listOf(vesicleClass), exclusive = plan.exclusive != 0, cells = exclusive ? plan.cells : plan.flags
  let count = countOf(vesicleClass), i = 0
  while (i < count) {
    const at = list + (<usize>i << 2), voxel = load<i32>(at)
    i++
    if (!chance(mobility)) continue
    const direction = <u32>((<u64>next() * 6) >> 32)
    const target = voxel + load<i32>(plan.offsets + (<usize>direction << 2))
    const flag = load<u8>(cells + <usize>target)
    if (flag == FREE) {
      store<i32>(at, target)
      if (exclusive) {
        store<u8>(cells + <usize>voxel, FREE)
        store<u8>(cells + <usize>target, TAKEN)
      }
      continue
    }
    if (flag == REFLECTING || flag == TAKEN) continue
    const gone = flag == SITES ? hits(plan, voxel, direction, vesicleClass, n) : !exclusive || chance(1 - plan.occupancy)
    if (!gone) continue
    if (exclusive) store<u8>(cells + <usize>voxel, FREE)
    i--
    count--
    store<i32>(at, load<i32>(list + (<usize>count << 2)))
  }
  setCount(vesicleClass, count)
}

/** Moves every free vesicle once. */
export function moveVesicles(plan: Plan, n: i32): void {
  for (let vesicleClass = 0; vesicleClass < plan.vesicleClasses; vesicleClass++) {
    const mobility = plan.mobility(vesicleClass)
    if (mobility <= 0) continue
    if (mobility < 1) moveLazy(plan, vesicleClass, mobility, n)
    else if (plan.exclusive != 0) moveExclusive(plan, vesicleClass, n)
    else moveIndependent(plan, vesicleClass, n)
  }
}

/** Vesicles that enter from a held bath during the step; they first move in the next one. */
export function letIn(plan: Plan): void {
  if (plan.boundaryCount == 0) return
  if (plan.exclusive == 0) {
    for (let vesicleClass = 0; vesicleClass < plan.vesicleClasses; vesicleClass++) {
      if (plan.mobility(vesicleClass) <= 0) continue
      for (let i = drawCount(changetype<CountTable>(vesicleClass == 0 ? plan.inflow0 : plan.inflow1)); i > 0; i--)
        enter(plan, vesicleClass, load<i32>(plan.boundary + (<usize>below(plan.boundaryCount) << 2)))
    }
    return
  }
  const gaps = changetype<CountTable>(plan.gap)
  let face = 0
  while (face < plan.boundaryCount) {
    const gap = drawCount(gaps)
    face += gap
    if (gap == GAP_CAP) continue
    if (face >= plan.boundaryCount) break
    const voxel = load<i32>(plan.boundary + (<usize>face << 2))
    if (load<u8>(plan.cells + voxel) == FREE)
      enter(plan, plan.vesicleClasses == 1 || chance(plan.inflowFirst) ? 0 : 1, voxel)
    face++
  }
}
