/**
 * What a run leaves behind, as f64 whole numbers in one stretch of memory, C site classes, S samples, K replicates of the run:
 * filledSum[C][S], filledSumSq[C][S], totalSumSq[S], readySum[C][S], readySumSq[C][S], firstAttachment[bins], events[C][K], exposure[C][K], declined[C][K].
 * The host zeroes it before a run and reads it after (workers/tally.ts).
 */
import { Plan } from './plan'

let filledSum: usize = 0
let filledSumSq: usize = 0
let totalSumSq: usize = 0
let readySum: usize = 0
let readySumSq: usize = 0
let firstAttachment: usize = 0
let events: usize = 0
let exposure: usize = 0
let declined: usize = 0
let samples: i32 = 0
let replicates: i32 = 0
let binSteps: i32 = 1

/** Points the tally at its memory. */
export function openTally(plan: Plan, base: usize, replicateCount: i32): void {
  samples = plan.samples
  replicates = replicateCount
  binSteps = plan.binSteps
  const perSample = <usize>(plan.siteClasses * samples) << 3, perReplicate = <usize>(plan.siteClasses * replicates) << 3
  filledSum = base
  filledSumSq = filledSum + perSample
  totalSumSq = filledSumSq + perSample
  readySum = totalSumSq + (<usize>samples << 3)
  readySumSq = readySum + perSample
  firstAttachment = readySumSq + perSample
  events = firstAttachment + (<usize>plan.bins << 3)
  exposure = events + perReplicate
  declined = exposure + perReplicate
}

@inline
function add(pointer: usize, value: f64): void {
  store<f64>(pointer, load<f64>(pointer) + value)
}

/** Filled and ready sites of one class at a sample. */
export function addSample(siteClass: i32, sample: i32, filled: i32, ready: i32): void {
  const at = <usize>(siteClass * samples + sample) << 3
  add(filledSum + at, filled)
  add(filledSumSq + at, <f64>filled * <f64>filled)
  add(readySum + at, ready)
  add(readySumSq + at, <f64>ready * <f64>ready)
}

/** Filled sites of all classes at a sample. */
export function addTotal(sample: i32, filled: i32): void {
  add(totalSumSq + (<usize>sample << 3), <f64>filled * <f64>filled)
}

/** An attachment in step n (0-based; its time is n + 1). */
export function addAttachment(siteClass: i32, replicate: i32, step: i32, first: bool): void {
  add(events + (<usize>(siteClass * replicates + replicate) << 3), 1)
  if (first) add(firstAttachment + (<usize>(step / binSteps) << 3), 1)
}

/** Empty sites of one class in a step; `weight` is floor(65536 x decline factor). */
export function addExposure(siteClass: i32, replicate: i32, empty: i32, weight: f64): void {
  const at = <usize>(siteClass * replicates + replicate) << 3
  add(exposure + at, empty)
  add(declined + at, <f64>empty * weight)
}
