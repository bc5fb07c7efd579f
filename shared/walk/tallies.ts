/** What the statistics read from merged blocks: events, exposure and expected attachments per replicate and kind of site. */
import { stirredChance } from './chances'
import type { OutcomeFrame } from './frame'
import type { ReplicateBlock, WalkPlan } from './types'

const DECLINE_SCALE = 65536

export interface Tallies {
  replicates: number
  /** Chance that an empty site attaches in a step by the closed form's assumption, at rest, per kind of site [1]. */
  chances: number[]
  /** [site class][replicate]. */
  events: number[][]
  exposureSteps: number[][]
  /** Exposure weighted with the decline's factor; the exposure itself without decline. */
  drivenSteps: number[][]
}

/**
 * Tallies of merged blocks.
 * @param frame - compiled scenario
 * @param block - all replicates as one block
 * @returns per replicate and kind of site: attachments [count], exposure [steps]; chances per step [1]
 */
export function talliesOf(frame: OutcomeFrame, block: ReplicateBlock): Tallies {
  return {
    replicates: block.to - block.from,
    chances: frame.sitesPerClass.map((_, j) => stirredChance(frame as WalkPlan, j)),
    events: block.events,
    exposureSteps: block.exposureSteps,
    drivenSteps: frame.decline ? block.declinedExposure!.map(row => row.map(value => value / DECLINE_SCALE)) : block.exposureSteps,
  }
}

/** Sum of a row of counts; 0 [1] where there is none. */
export const sumOf = (row: readonly number[] | undefined): number => {
  let sum = 0
  for (const value of row ?? []) sum += value
  return sum
}

/**
 * Attachments that the closed form expects for the exposure seen, and those seen.
 * @param tallies - of a run
 * @returns both, over all kinds of site and replicates [count]
 */
export function expectedAndSeen(tallies: Tallies): { expected: number, seen: number } {
  let expected = 0, seen = 0
  tallies.chances.forEach((chance, j) => {
    expected += chance * sumOf(tallies.drivenSteps[j])
    seen += sumOf(tallies.events[j])
  })
  return { expected, seen }
}

/** Standard error of the ratio as replicates come in: linearised, sums taken in the order of replicates, so that a stopping rule is the same everywhere. */
export class RatioPrecision {
  private replicates = 0
  private expected = 0
  private seen = 0
  private expectedSq = 0
  private product = 0
  private seenSq = 0
  constructor(private readonly frame: OutcomeFrame) {}

  /** Adds the next block; blocks come in order of their replicates. */
  add(block: ReplicateBlock): void {
    const { chances, events, drivenSteps, replicates } = talliesOf(this.frame, block)
    for (let replicate = 0; replicate < replicates; replicate++) {
      let expected = 0, seen = 0
      chances.forEach((chance, j) => {
        expected += chance * drivenSteps[j]![replicate]!
        seen += events[j]![replicate]!
      })
      this.replicates++
      this.expected += expected
      this.seen += seen
      this.expectedSq += expected * expected
      this.product += expected * seen
      this.seenSq += seen * seen
    }
  }

  /** Ratio so far and its standard error; null before the second replicate or the first attachment. */
  read(): { ratio: number, standardError: number, replicates: number } | null {
    const { replicates, expected, seen } = this
    if (replicates < 2 || seen === 0) return null
    const ratio = expected / seen
    const residual = Math.max(0, this.expectedSq - 2 * ratio * this.product + ratio * ratio * this.seenSq)
    return { ratio, standardError: Math.sqrt(residual * replicates / (replicates - 1)) / seen, replicates }
  }
}
