// The law of the waiting time to the next effective attempt, for every start, from one solve (K is symmetric).
import { Box, clearBox, settle, stepBox } from './solve-box'

/** Steps between two looks at how the tail decays. */
const LOOK: i32 = 32
/** The tail is taken as one exponential when its rate changes by less than this over one window. */
const STEADY: f64 = 2e-3
/** Below this a chance per step is nothing. */
const NOTHING: f64 = 1e-10

/** Written by the host word by word, in this order. */
@unmanaged
export class WaitSolve {
  box: usize
  /** Padded indices (i32) in the box of the voxels in front of sites, and of one representative per class. */
  fronts: usize
  frontCount: i32
  representatives: usize
  classCount: i32
  /** Steps to solve at most. */
  steps: i32
  /** Steps over which the decay must hold still, a multiple of 32. */
  window: i32
  /** 1 when nothing ever leaves the terminal. */
  sealed: i32
  /** f32 [step − 1][class]: chance that the next attempt comes at that step. */
  waits: usize
  /** f64 [class]: chance that no attempt has come yet. */
  survival: usize
  /** f64 [look][class]: rates seen at the looks. */
  rates: usize
  /** Answers. */
  solved: i32
  steady: i32
  /** Chance per step of an attempt from a voxel in front of a site. */
  chance: f64
  /** Ratio of the tail over two steps. */
  ratio: f64
}

@inline
function waitAt(job: WaitSolve, step: i32, kind: i32): f64 {
  return <f64>load<f32>(job.waits + (<usize>((step - 1) * job.classCount + kind) << 2))
}

/** Chance per two steps at which the tail thins out after `step`: hazard where nothing leaves, else the decay of the law itself. */
function rateAt(job: WaitSolve, step: i32, kind: i32): f64 {
  const last = waitAt(job, step, kind)
  if (job.sealed != 0) {
    const pair = last + waitAt(job, step - 1, kind)
    return pair / (load<f64>(job.survival + (<usize>kind << 3)) + pair)
  }
  const before = waitAt(job, step - LOOK, kind)
  if (!(before > 0)) return 1
  return 1 - sqrt(sqrt(sqrt(sqrt(last / before))))
}

/** Notes the rates of all classes; true when none has moved over one window, or when nothing is left. */
function look(job: WaitSolve, step: i32): bool {
  const index = step / LOOK - 1
  const lag = job.window / LOOK
  let moving = index < 2 * lag
  let largest: f64 = 0
  for (let kind = 0; kind < job.classCount; kind++) {
    const at = job.rates + (<usize>(index * job.classCount + kind) << 3)
    const rate = step >= 2 * LOOK ? rateAt(job, step, kind) : 1
    store<f64>(at, rate)
    largest = max(largest, waitAt(job, step, kind))
    if (!moving && !(abs(rate - load<f64>(at - (<usize>(lag * job.classCount) << 3))) <= STEADY * rate)) moving = true
  }
  return !moving || largest < NOTHING
}

/** Solves; fills `waits`, `survival`, `solved`, `steady`, `ratio`. */
export function solveWaits(pointer: usize): void {
  const job = changetype<WaitSolve>(pointer)
  const box = changetype<Box>(job.box)
  clearBox(box)
  for (let i = 0; i < job.frontCount; i++)
    store<f32>(box.current + (<usize>load<i32>(job.fronts + (<usize>i << 2)) << 2), <f32>job.chance)
  settle(box)
  for (let kind = 0; kind < job.classCount; kind++) store<f64>(job.survival + (<usize>kind << 3), 1)
  let out = job.waits
  let step = 0
  let steady = false
  while (step < job.steps && !steady) {
    if (step > 0) stepBox(box)
    step++
    for (let kind = 0; kind < job.classCount; kind++) {
      const wait = load<f32>(box.current + (<usize>load<i32>(job.representatives + (<usize>kind << 2)) << 2))
      store<f32>(out, wait)
      out += 4
      const left = job.survival + (<usize>kind << 3)
      store<f64>(left, load<f64>(left) - <f64>wait)
    }
    if (step % LOOK == 0) steady = look(job, step)
  }
  job.solved = step
  job.steady = steady ? 1 : 0
  job.ratio = steady ? 1 - rateOfAll(job, step) : 0
}

/** Mean of the classes' last rates; they differ by less than the steadiness asked for. */
function rateOfAll(job: WaitSolve, step: i32): f64 {
  const index = step / LOOK - 1
  let sum: f64 = 0
  for (let kind = 0; kind < job.classCount; kind++) sum += load<f64>(job.rates + (<usize>(index * job.classCount + kind) << 3))
  return min(1, max(0, sum / <f64>job.classCount))
}
