// The tally of the attempt sampler: changes are noted where they fall and summed up once a run. Layout as in tally.ts.
import { Plan } from './plan'

let plan: Plan = changetype<Plan>(0)
let filledSum: usize = 0
let filledSumSq: usize = 0
let totalSumSq: usize = 0
let readySum: usize = 0
let readySumSq: usize = 0
let firstAttachment: usize = 0
let events: usize = 0
let exposure: usize = 0
let declined: usize = 0
let replicates: i32 = 0
let replicate: i32 = 0
/** First sample that sees what happens now. */
let sample: i32 = 0
let declinedBefore: usize = 0
export let filled0: i32 = 0
export let filled1: i32 = 0
let ready0: i32 = 0
let ready1: i32 = 0

/** Points the tally at its (zeroed) memory; `weights` f64 [steps + 1] is the declined exposure of one site before each step, or 0. */
export function openChanges(opened: Plan, base: usize, replicateCount: i32, weights: usize): void {
  plan = opened
  replicates = replicateCount
  declinedBefore = weights
  const perSample = <usize>(plan.siteClasses * plan.samples) << 3
  const perReplicate = <usize>(plan.siteClasses * replicates) << 3
  filledSum = base
  filledSumSq = filledSum + perSample
  totalSumSq = filledSumSq + perSample
  readySum = totalSumSq + (<usize>plan.samples << 3)
  readySumSq = readySum + perSample
  firstAttachment = readySumSq + perSample
  events = firstAttachment + (<usize>plan.bins << 3)
  exposure = events + perReplicate
  declined = exposure + perReplicate
}

export function openReplicate(index: i32): void {
  replicate = index
  sample = 0
  filled0 = filled1 = ready0 = ready1 = 0
}

@inline
function add(pointer: usize, value: f64): void {
  store<f64>(pointer, load<f64>(pointer) + value)
}

/** What happens in step n is seen by samples after n. */
@inline
function seek(n: i32): bool {
  while (sample < plan.samples && <i32>load<u32>(plan.sampleSteps + (<usize>sample << 2)) <= n) sample++
  return sample < plan.samples
}

function noteFilled(siteClass: i32, change: i32, seen: bool): void {
  const before = siteClass == 0 ? filled0 : filled1
  const total = filled0 + filled1
  if (siteClass == 0) filled0 += change
  else filled1 += change
  if (!seen) return
  const at = <usize>(siteClass * plan.samples + sample) << 3
  add(filledSum + at, change)
  add(filledSumSq + at, <f64>(change * (2 * before + change)))
  if (plan.siteClasses == 2) add(totalSumSq + (<usize>sample << 3), <f64>(change * (2 * total + change)))
}

function noteReady(siteClass: i32, change: i32, seen: bool): void {
  const before = siteClass == 0 ? ready0 : ready1
  if (siteClass == 0) ready0 += change
  else ready1 += change
  if (!seen) return
  const at = <usize>(siteClass * plan.samples + sample) << 3
  add(readySum + at, change)
  add(readySumSq + at, <f64>(change * (2 * before + change)))
}

@inline
function weightBefore(step: i32): f64 {
  return declinedBefore == 0 ? <f64>step * 65536 : load<f64>(declinedBefore + (<usize>step << 3))
}

function addExposure(siteClass: i32, sites: i32, step: i32): void {
  const at = <usize>(siteClass * replicates + replicate) << 3
  add(exposure + at, <f64>sites * <f64>step)
  add(declined + at, <f64>sites * weightBefore(step))
}

/** A site that is filled (and ready) at the start. */
export function startFilled(siteClass: i32): void {
  noteFilled(siteClass, 1, true)
  noteReady(siteClass, 1, true)
}

/** A site attaches a vesicle in step n: it was empty in that step too. */
export function noteAttachment(siteClass: i32, n: i32, first: bool, ready: bool): void {
  const seen = seek(n)
  noteFilled(siteClass, 1, seen)
  if (ready) noteReady(siteClass, 1, seen)
  add(events + (<usize>(siteClass * replicates + replicate) << 3), 1)
  if (first) add(firstAttachment + (<usize>(n / plan.binSteps) << 3), 1)
  addExposure(siteClass, 1, n + 1)
}

/** A site is emptied before vesicles move in step n. */
export function noteEmptied(siteClass: i32, n: i32, ready: bool): void {
  const seen = seek(n)
  noteFilled(siteClass, -1, seen)
  if (ready) noteReady(siteClass, -1, seen)
  addExposure(siteClass, -1, n)
}

/** A captured vesicle becomes ready before vesicles move in step n. */
export function noteRipened(siteClass: i32, n: i32): void {
  noteReady(siteClass, 1, seek(n))
}

/** Ends a replicate: sites still empty were so to the end. */
export function closeReplicate(sites0: i32, sites1: i32): void {
  addExposure(0, sites0 - filled0, plan.steps)
  if (plan.siteClasses == 2) addExposure(1, sites1 - filled1, plan.steps)
}

function sumUp(row: usize): void {
  let sum: f64 = 0
  for (let i = 0; i < plan.samples; i++, row += 8) {
    sum += load<f64>(row)
    store<f64>(row, sum)
  }
}

/** Turns changes into counts. */
export function closeChanges(): void {
  const row = <usize>plan.samples << 3
  for (let siteClass = 0; siteClass < plan.siteClasses; siteClass++) {
    const at = <usize>siteClass * row
    sumUp(filledSum + at)
    sumUp(filledSumSq + at)
    sumUp(readySum + at)
    sumUp(readySumSq + at)
  }
  if (plan.siteClasses == 2) sumUp(totalSumSq)
}
