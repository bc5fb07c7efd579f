/** What of a run is done, being done and to do. Chunks are handed out in the order of replicates, so that little is lost when a run is stopped; blocks are put together here, whoever walked their chunks. */
import { mergeBlocks, type ReplicateRange } from '../shared/walk/merge'
import type { ReplicateBlock } from '../shared/walk/types'

/** Replicates to be walked in one go, within one block; `failures` counts the workers that they were lost with. */
export interface Task { block: number, from: number, to: number, failures: number }

export class RunBook {
  /** Per block: its chunks from the block's start on, joined. */
  private readonly joined: (ReplicateBlock | undefined)[]
  /** Chunks that wait for an earlier one, by first replicate. */
  private readonly early = new Map<number, ReplicateBlock>()
  private readonly givenBack: Task[] = []
  private cursor = { block: 0, replicate: 0 }
  private wholeCount = 0
  replicatesDone = 0

  constructor(readonly ranges: readonly ReplicateRange[]) {
    this.joined = ranges.map(() => undefined)
    this.cursor.replicate = ranges[0]?.from ?? 0
  }

  /** The next replicates that nobody has taken, at most so many; those given back come first. */
  take(most: number): Task | undefined {
    const again = this.givenBack.shift()
    if (again) return again
    const range = this.ranges[this.cursor.block]
    if (!range) return undefined
    const { block, replicate: from } = this.cursor, to = Math.min(range.to, from + most)
    this.cursor = to < range.to ? { block, replicate: to } : { block: block + 1, replicate: this.ranges[block + 1]?.from ?? to }
    return { block, from, to, failures: 0 }
  }

  giveBack(task: Task): void {
    this.givenBack.push(task)
    this.givenBack.sort((a, b) => a.from - b.from)
  }

  /** Enters the walked replicates of a task; tasks may come in any order. */
  enter(task: Task, chunk: ReplicateBlock): void {
    this.early.set(chunk.from, chunk)
    this.replicatesDone += chunk.to - chunk.from
    for (let next = this.joined[task.block]?.to ?? this.ranges[task.block]!.from; ;) {
      const fitting = this.early.get(next)
      if (!fitting || next >= this.ranges[task.block]!.to) break
      this.early.delete(next)
      const before = this.joined[task.block]
      this.joined[task.block] = before ? mergeBlocks(before, fitting) : fitting
      next = fitting.to
    }
    while (this.wholeCount < this.ranges.length && this.joined[this.wholeCount]?.to === this.ranges[this.wholeCount]!.to) this.wholeCount++
  }

  /** Whole blocks from the first on. */
  wholeBlocks(): ReplicateBlock[] {
    return this.joined.slice(0, this.wholeCount) as ReplicateBlock[]
  }

  /** Contiguous replicates from the first on; the last block may be cut short. */
  prefix(): ReplicateBlock[] {
    const cut = this.joined[this.wholeCount]
    return cut ? [...this.wholeBlocks(), cut] : this.wholeBlocks()
  }
}
