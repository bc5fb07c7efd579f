// The law of where the next effective attempt happens, by bins of the waiting time: one solve per class of starts.
import { aliasRow } from './alias'
import { Box, clearBox, narrowBox, settle, stepBox } from './solve-box'

/** Of a row's mass, what may be cut off far away from the start. */
const CUT: f64 = 1e-6

/** Written by the host word by word, in this order. */
@unmanaged
export class LandingSolve {
  box: usize
  /** Padded index of the start, and of the voxel in front of each site in order of distance from the start. */
  start: i32
  fronts: usize
  siteCount: i32
  /** Steps solved, and the bin (u8) of each step from 1 on. */
  steps: i32
  binOf: usize
  binCount: i32
  /** f32 [step − 1][rank]: chance of an attempt at that step and site. */
  laws: usize
  /** f64 [bin·2 + parity][rank]. */
  sums: usize
  /** Waiting law of the start: f32 with this many bytes between steps, `waitSteps` of them. */
  waits: usize
  waitStride: usize
  waitSteps: i32
  /** 1 when `laws` already hold the forward solve (a mirror image of an earlier start). */
  solved: i32
  /** f64 [rank]: where a vesicle lands that comes from far away; 0 where nothing is far. */
  far: usize
  /** Rows of cells made here, one after another, and their lengths (u32) [bin·2 + parity]. */
  cells: usize
  lengths: usize
  /** Late bins after the solved ones: f64 [1 + late bin][parity][rank], the law from a uniform start in the last solved bin and in each late one, and f64 [late bin][parity], how much of the last solved bin's difference from it is left. */
  lateLaws: usize
  lateShares: usize
  lateCount: i32
  /** 2·siteCount f64 of working room. */
  room: usize
  /** Cells made. */
  made: i32
  chance: f64
  /** Answers: error within bins, mass that comes from outside the box, later mass weighted by steps solved over step, and how far the last solved bin is from its uniform start's (total variation). */
  error: f64
  farMass: f64
  lateMass: f64
  difference: f64
}

@inline
function waitAt(job: LandingSolve, step: i32): f64 {
  return <f64>load<f32>(job.waits + <usize>(step - 1) * job.waitStride)
}

@inline
function rowOf(job: LandingSolve, step: i32): i32 {
  return (<i32>load<u8>(job.binOf + min(step, job.steps)) << 1) + (step & 1)
}

/** Walks the expectation of one vesicle forward and notes its attempts by step. */
function forward(job: LandingSolve): void {
  const box = changetype<Box>(job.box)
  clearBox(box)
  narrowBox(box, job.start)
  store<f32>(box.current + (<usize>job.start << 2), 1)
  settle(box)
  const chance = <f32>job.chance
  let law = job.laws
  for (let step = 1; step <= job.steps; step++) {
    if (step > 1) stepBox(box)
    for (let rank = 0; rank < job.siteCount; rank++) {
      store<f32>(law, load<f32>(box.current + (<usize>load<i32>(job.fronts + (<usize>rank << 2)) << 2)) * chance)
      law += 4
    }
  }
}

/** Adds the steps' laws up to bins. */
function collect(job: LandingSolve): void {
  memory.fill(job.sums, 0, <usize>(job.binCount * 2 * job.siteCount) << 3)
  let law = job.laws
  for (let step = 1; step <= job.steps; step++) {
    let sums = job.sums + <usize>(rowOf(job, step) * job.siteCount) * 8
    for (let rank = 0; rank < job.siteCount; rank++) {
      store<f64>(sums, load<f64>(sums) + <f64>load<f32>(law))
      law += 4
      sums += 8
    }
  }
}

/** Half the absolute difference between each step's law and its bin's: the error per jump of binning alone. */
function binningError(job: LandingSolve): f64 {
  let difference: f64 = 0
  for (let step = 1; step <= job.steps; step++) {
    const law = job.laws + <usize>((step - 1) * job.siteCount) * 4
    const sums = job.sums + <usize>(rowOf(job, step) * job.siteCount) * 8
    let here: f64 = 0
    let bin: f64 = 0
    for (let rank = 0; rank < job.siteCount; rank++) {
      here += <f64>load<f32>(law + (<usize>rank << 2))
      bin += load<f64>(sums + (<usize>rank << 3))
    }
    const scale = bin > 0 ? here / bin : 0
    for (let rank = 0; rank < job.siteCount; rank++)
      difference += abs(<f64>load<f32>(law + (<usize>rank << 2)) - scale * load<f64>(sums + (<usize>rank << 3)))
  }
  return difference / 2
}

/** What the whole terminal's waiting law has above the box's came back from outside the box, and lands as from there. */
function addFar(job: LandingSolve): void {
  let far: f64 = 0
  const last = min(job.waitSteps, job.steps)
  for (let step = 1; job.far != 0 && step <= last; step++) {
    let missing = waitAt(job, step)
    const law = job.laws + <usize>((step - 1) * job.siteCount) * 4
    for (let rank = 0; rank < job.siteCount; rank++) missing -= <f64>load<f32>(law + (<usize>rank << 2))
    if (!(missing > 0)) continue
    far += missing
    const sums = job.sums + <usize>(rowOf(job, step) * job.siteCount) * 8
    for (let rank = 0; rank < job.siteCount; rank++) {
      const at = <usize>rank << 3
      store<f64>(sums + at, load<f64>(sums + at) + missing * load<f64>(job.far + at))
    }
  }
  job.farMass = far
  job.lateMass = 0
  for (let step = job.steps + 1; step <= job.waitSteps; step++) job.lateMass += waitAt(job, step) * <f64>job.steps / <f64>step
}

/** Late landings: the law from a uniform start, which is the waiting law read across sites, plus what is left of this start's own difference from it. */
function addLate(job: LandingSolve): void {
  const width = <usize>job.siteCount << 3
  job.difference = 0
  for (let parity = 0; parity < 2; parity++) {
    const last = job.sums + <usize>(2 * (job.binCount - 1) + parity) * width
    const uniform = job.lateLaws + <usize>parity * width
    let total: f64 = 0
    for (let rank = 0; rank < job.siteCount; rank++) total += load<f64>(last + (<usize>rank << 3))
    let difference: f64 = 0
    for (let rank = 0; rank < job.siteCount; rank++)
      difference += total > 0 ? abs(load<f64>(last + (<usize>rank << 3)) / total - load<f64>(uniform + (<usize>rank << 3))) : 0
    job.difference = max(job.difference, difference / 2)
    for (let bin = 0; bin < job.lateCount; bin++) {
      const share = total > 0 ? load<f64>(job.lateShares + (<usize>(2 * bin + parity) << 3)) / total : 0
      const rest = total > 0 ? share * total : 0
      const law = job.lateLaws + <usize>(2 * (bin + 1) + parity) * width
      const sums = job.sums + <usize>(2 * (job.binCount + bin) + parity) * width
      for (let rank = 0; rank < job.siteCount; rank++) {
        const at = <usize>rank << 3
        store<f64>(sums + at, max(0, load<f64>(law + at) + share * load<f64>(last + at) - rest * load<f64>(uniform + at)))
      }
    }
  }
}

/** Makes one row of cells; far ranks that hold next to nothing are left out. */
function makeRow(job: LandingSolve, row: i32, cells: usize): i32 {
  const sums = job.sums + <usize>(row * job.siteCount) * 8
  let total: f64 = 0
  for (let rank = 0; rank < job.siteCount; rank++) total += load<f64>(sums + (<usize>rank << 3))
  if (!(total > 0)) return 0
  let length = job.siteCount
  let cut: f64 = 0
  while (length > 1) {
    cut += load<f64>(sums + (<usize>(length - 1) << 3))
    if (cut > CUT * total) break
    length--
  }
  let kept: f64 = 0
  for (let rank = 0; rank < length; rank++) kept += load<f64>(sums + (<usize>rank << 3))
  aliasRow(sums, length, kept, cells, job.room)
  return length
}

/** Solves (unless done) and makes the rows of one class. */
export function solveLandings(pointer: usize): void {
  const job = changetype<LandingSolve>(pointer)
  if (job.solved == 0) forward(job)
  collect(job)
  job.error = binningError(job)
  addFar(job)
  addLate(job)
  let made = 0
  for (let row = 0; row < 2 * (job.binCount + job.lateCount); row++) {
    const length = makeRow(job, row, job.cells + (<usize>made << 2))
    store<u32>(job.lengths + (<usize>row << 2), length)
    made += length
  }
  job.made = made
}

/** Chance to leave the box before any attempt, from the voxel in front of each site; by reversibility the law of arrivals from outside, up to a factor. */
export function solveFar(pointer: usize, out: usize): void {
  const job = changetype<LandingSolve>(pointer)
  const box = changetype<Box>(job.box)
  clearBox(box)
  for (let site = 0; site < job.siteCount; site++) {
    store<f64>(out + (<usize>site << 3), 1)
    store<f32>(box.current + (<usize>load<i32>(job.fronts + (<usize>site << 2)) << 2), <f32>job.chance)
  }
  settle(box)
  for (let step = 1; step <= job.steps; step++) {
    if (step > 1) stepBox(box)
    for (let site = 0; site < job.siteCount; site++) {
      const at = out + (<usize>site << 3)
      store<f64>(at, load<f64>(at) - <f64>load<f32>(box.current + (<usize>load<i32>(job.fronts + (<usize>site << 2)) << 2)))
    }
  }
  let total: f64 = 0
  for (let site = 0; site < job.siteCount; site++) total += max(0, load<f64>(out + (<usize>site << 3)))
  for (let site = 0; site < job.siteCount; site++) {
    const at = out + (<usize>site << 3)
    store<f64>(at, max(0, load<f64>(at)) / total)
  }
}
