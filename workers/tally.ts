/** Layout of a run's tally in the kernel's memory (assembly/tally.ts) and its reading as a block. */
import type { ReplicateBlock, WalkPlan } from '../shared/walk/types'
import type { KernelHost, WalkCall } from './host'

/** f64 entries of the tally of a run of `replicates`. */
export function tallyLength(plan: WalkPlan, replicates: number): number {
  const classes = plan.sitesPerClass.length, samples = plan.sampleSteps.length
  return 4 * classes * samples + samples + plan.histogramBins + 3 * classes * replicates
}

/** Cuts a tally into the arrays of a block. */
export function readTally(plan: WalkPlan, tally: Float64Array, from: number, to: number): ReplicateBlock {
  const classes = plan.sitesPerClass.length, samples = plan.sampleSteps.length
  let at = 0
  const take = (length: number) => Array.from(tally.subarray(at, at += length))
  const takeRows = (length: number) => Array.from({ length: classes }, () => take(length))
  const filledSum = takeRows(samples), filledSumSq = takeRows(samples), totalSumSq = take(samples)
  const readySum = takeRows(samples), readySumSq = takeRows(samples), firstAttachment = take(plan.histogramBins)
  const events = takeRows(to - from), exposureSteps = takeRows(to - from), declinedExposure = takeRows(to - from)
  return {
    from, to, filledSum, filledSumSq,
    ...(classes === 2 && { totalSumSq }),
    ...(plan.readyPerStep.some(chance => chance !== null) && { readySum, readySumSq }),
    firstAttachment, events, exposureSteps,
    ...(plan.decline && { declinedExposure }),
  }
}

/** Runs one call of the kernel into a fresh tally and reads it. */
export function runTallied(host: KernelHost, plan: WalkPlan, from: number, to: number, call: (tally: number) => void): ReplicateBlock {
  const length = tallyLength(plan, to - from), tally = host.allocate(length * 8)
  host.doubles(tally, length).fill(0)
  call(tally)
  const block = readTally(plan, host.doubles(tally, length), from, to)
  host.release(tally)
  return block
}

/** A walk call as `PreparedWalk.run` wants it. */
export function runnerOf(host: KernelHost, plan: WalkPlan, pointerOf: () => number, walk: WalkCall) {
  return (low: number, high: number, from: number, to: number) =>
    runTallied(host, plan, from, to, tally => walk(pointerOf(), tally, low, high, from, to))
}
