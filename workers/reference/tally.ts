/** Counts of a run of the plain walk, gathered straight into a block. */
import type { ReplicateBlock, WalkPlan } from '../../shared/walk/types'

const zeros = (length: number) => new Array<number>(length).fill(0)

export class BlockTally {
  private readonly block: Required<ReplicateBlock>

  constructor(private readonly plan: WalkPlan, from: number, to: number) {
    const rows = (length: number) => plan.sitesPerClass.map(() => zeros(length))
    const samples = plan.sampleSteps.length
    this.block = {
      from, to,
      filledSum: rows(samples), filledSumSq: rows(samples), totalSumSq: zeros(samples), readySum: rows(samples), readySumSq: rows(samples),
      firstAttachment: zeros(plan.histogramBins), events: rows(to - from), exposureSteps: rows(to - from), declinedExposure: rows(to - from),
    }
  }

  /** Filled and ready sites per class at a sample. */
  sample(index: number, filled: readonly number[], ready: readonly number[]): void {
    const { filledSum, filledSumSq, totalSumSq, readySum, readySumSq } = this.block
    let total = 0
    filled.forEach((count, siteClass) => {
      total += count
      filledSum[siteClass]![index]! += count
      filledSumSq[siteClass]![index]! += count * count
      readySum[siteClass]![index]! += ready[siteClass]!
      readySumSq[siteClass]![index]! += ready[siteClass]! ** 2
    })
    totalSumSq[index]! += total * total
  }

  /** An attachment in step n (0-based). */
  attachment(siteClass: number, replicate: number, n: number, first: boolean): void {
    this.block.events[siteClass]![replicate - this.block.from]!++
    if (first) this.block.firstAttachment[Math.floor(n / this.plan.histogramBinSteps)]!++
  }

  /** Empty sites of a class in one step under the step's decline factor. */
  exposure(siteClass: number, replicate: number, empty: number, factor: number): void {
    this.block.exposureSteps[siteClass]![replicate - this.block.from]! += empty
    this.block.declinedExposure[siteClass]![replicate - this.block.from]! += empty * Math.floor(factor * 65536)
  }

  /** The block, without what its plan does not ask for. */
  finish(): ReplicateBlock {
    const { totalSumSq, readySum, readySumSq, declinedExposure, ...block } = this.block
    return {
      ...block,
      ...(this.plan.sitesPerClass.length === 2 && { totalSumSq }),
      ...(this.plan.readyPerStep.some(chance => chance !== null) && { readySum, readySumSq }),
      ...(this.plan.decline && { declinedExposure }),
    }
  }
}
