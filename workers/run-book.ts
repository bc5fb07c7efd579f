/** What of a run is done, being done and to do. Keeps blocks in order whoever walked them. */
import { mergeBlocks, type ReplicateRange } from '../shared/walk/merge'
import type { ReplicateBlock } from '../shared/walk/types'

/** A block to be walked, or what is left of one; `failures` counts the workers that it was lost with. */
export interface Task { block: number, from: number, to: number, failures: number }

export class RunBook {
  private readonly done: (ReplicateBlock | undefined)[]
  private readonly waiting: Task[]
  replicatesDone = 0

  constructor(readonly ranges: readonly ReplicateRange[]) {
    this.done = ranges.map(() => undefined)
    this.waiting = ranges.map(({ from, to }, block) => ({ block, from, to, failures: 0 }))
  }

  /** The earliest task that nobody has taken. */
  take(): Task | undefined {
    return this.waiting.shift()
  }

  /** Gives back what is left of a task; it is taken next, so that the prefix is not held up. */
  giveBack(task: Task): void {
    this.waiting.unshift(task)
    this.waiting.sort((a, b) => a.from - b.from)
  }

  /** Enters a walked chunk. Chunks of one block come in order. */
  enter(task: Task, chunk: ReplicateBlock): void {
    const before = this.done[task.block]
    this.done[task.block] = before ? mergeBlocks(before, chunk) : chunk
    this.replicatesDone += chunk.to - chunk.from
  }

  private isWhole(block: number): boolean {
    const done = this.done[block], range = this.ranges[block]!
    return done !== undefined && done.to === range.to
  }

  /** Whole blocks from the first on. */
  wholeBlocks(): ReplicateBlock[] {
    let count = 0
    while (count < this.ranges.length && this.isWhole(count)) count++
    return this.done.slice(0, count) as ReplicateBlock[]
  }

  /** Contiguous replicates from the first on; the last block may be cut short. */
  prefix(): ReplicateBlock[] {
    const whole = this.wholeBlocks(), cut = this.done[whole.length]
    return cut ? [...whole, cut] : whole
  }
}
