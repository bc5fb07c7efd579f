/** Replicate blocks: how a run is cut into them and how they are put together again. Integers only, so order cannot matter. */
import type { ReplicateBlock } from './types'

/** Replicates in a block of a run of N: max(50, ceil(N/400)) [replicates]. */
export const blockSize = (replicates: number): number => Math.max(50, Math.ceil(replicates / 400))

export interface ReplicateRange { from: number, to: number }
/** The blocks of a run of so many [replicates], in order; the last may be shorter. */
export function blockRanges(replicates: number): ReplicateRange[] {
  const size = blockSize(replicates)
  return Array.from({ length: Math.ceil(replicates / size) }, (_, i) => ({ from: i * size, to: Math.min(replicates, (i + 1) * size) }))
}

const addRows = (a: number[], b: number[]): number[] => {
  if (a.length !== b.length) throw new RangeError(`mergeBlocks: rows of ${a.length} and ${b.length} entries`)
  return a.map((value, i) => value + b[i]!)
}
const addTables = (a: number[][], b: number[][]) => a.map((row, i) => addRows(row, b[i] ?? []))
const joinTables = (a: number[][], b: number[][]) => a.map((row, i) => row.concat(b[i] ?? []))
type OptionalKey = 'totalSumSq' | 'readySum' | 'readySumSq' | 'declinedExposure'

/** Joins two neighbouring blocks; the order of the arguments does not matter. Throws when they do not touch. */
export function mergeBlocks(one: ReplicateBlock, other: ReplicateBlock): ReplicateBlock {
  const [a, b] = one.from <= other.from ? [one, other] : [other, one]
  if (a.to !== b.from) throw new RangeError(`mergeBlocks: [${a.from}, ${a.to}) and [${b.from}, ${b.to}) do not touch`)
  const both = <K extends OptionalKey>(key: K, join: (x: NonNullable<ReplicateBlock[K]>, y: NonNullable<ReplicateBlock[K]>) => NonNullable<ReplicateBlock[K]>) => {
    const x = a[key], y = b[key]
    if ((x === undefined) !== (y === undefined)) throw new RangeError(`mergeBlocks: only one block has ${key}`)
    return x !== undefined && y !== undefined ? { [key]: join(x, y) } : {}
  }
  return {
    from: a.from,
    to: b.to,
    filledSum: addTables(a.filledSum, b.filledSum),
    filledSumSq: addTables(a.filledSumSq, b.filledSumSq),
    ...both('totalSumSq', addRows),
    ...both('readySum', addTables),
    ...both('readySumSq', addTables),
    firstAttachment: addRows(a.firstAttachment, b.firstAttachment),
    events: joinTables(a.events, b.events),
    exposureSteps: joinTables(a.exposureSteps, b.exposureSteps),
    ...both('declinedExposure', joinTables),
  }
}

/** Joins blocks given in any order into one; they must cover one range without gap or overlap. */
export function mergeAll(blocks: readonly ReplicateBlock[]): ReplicateBlock {
  if (blocks.length === 0) throw new RangeError('mergeAll: no blocks')
  // Pairwise halves keep the joined rows from being copied once per block.
  let level = [...blocks].sort((a, b) => a.from - b.from)
  while (level.length > 1) {
    level = Array.from({ length: Math.ceil(level.length / 2) }, (_, i) =>
      level[2 * i + 1] === undefined ? level[2 * i]! : mergeBlocks(level[2 * i]!, level[2 * i + 1]!))
  }
  return level[0]!
}

/** The blocks that follow one another without a gap from replicate `start` on. */
export function contiguousPrefix(blocks: readonly ReplicateBlock[], start = 0): ReplicateBlock[] {
  const prefix: ReplicateBlock[] = []
  let next = start
  for (const block of [...blocks].sort((a, b) => a.from - b.from)) {
    if (block.from !== next) break
    prefix.push(block)
    next = block.to
  }
  return prefix
}
