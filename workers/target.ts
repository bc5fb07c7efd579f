/**
 * Walking until the ratio is known well enough. Where a run may stop is fixed beforehand, so that it stops at the same replicate on any
 * number of workers, and so that its blocks are those of a plain run of as many replicates: every 50 up to 20,000, then only where the
 * number doubles (blocks of twice the size are then pairs of the earlier ones).
 */
import { blockSize, mergeAll, type ReplicateRange } from '../shared/walk/merge'
import type { OutcomeFrame } from '../shared/walk/frame'
import { RatioPrecision } from '../shared/walk/tallies'
import type { ReplicateBlock } from '../shared/walk/types'

const FIRST_STAGE = 20_000

/** The cap that a target run can really reach: any number up to 20,000, above that the doubled ones. */
export function reachableCap(cap: number): number {
  if (cap <= FIRST_STAGE) return cap
  let stage = FIRST_STAGE
  while (stage * 2 <= cap) stage *= 2
  return stage
}

/** Blocks to walk for a target run: small ones first, twice as large in each later stage. */
export function targetRanges(cap: number): ReplicateRange[] {
  const end = reachableCap(cap), ranges: ReplicateRange[] = []
  for (let stage = FIRST_STAGE, from = 0; from < end; stage *= 2) {
    const size = blockSize(Math.min(stage, end))
    for (; from < Math.min(stage, end); from = ranges[ranges.length - 1]!.to) ranges.push({ from, to: Math.min(from + size, end) })
  }
  return ranges
}

const mayStopAt = (replicates: number): boolean => {
  let stage = replicates
  while (stage > FIRST_STAGE && stage % 2 === 0) stage /= 2
  return replicates <= FIRST_STAGE || stage === FIRST_STAGE
}

/** Judges whole blocks as they become contiguous. */
export class Target {
  private readonly precision: RatioPrecision
  private judged = 0

  constructor(frame: OutcomeFrame, private readonly standardError: number) {
    this.precision = new RatioPrecision(frame)
  }

  /** Number of leading blocks that meet the target; null when none does yet. */
  met(wholeBlocks: readonly ReplicateBlock[]): number | null {
    while (this.judged < wholeBlocks.length) {
      const block = wholeBlocks[this.judged++]!
      this.precision.add(block)
      const now = this.precision.read()
      if (now && mayStopAt(block.to) && now.standardError <= this.standardError) return this.judged
    }
    return null
  }
}

/** Joins neighbouring blocks so that each holds `size` replicates; the last may be shorter. */
export function regroup(blocks: readonly ReplicateBlock[], size: number): ReplicateBlock[] {
  const groups = new Map<number, ReplicateBlock[]>()
  for (const block of blocks) {
    const group = Math.floor(block.from / size)
    groups.set(group, [...groups.get(group) ?? [], block])
  }
  return [...groups.values()].map(mergeAll)
}
