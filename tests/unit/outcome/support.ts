/** Blocks made from a simple law, one generator per replicate, so that any cut of the replicates sums to the same. */
import type { ReplicateBlock } from '../../../shared/walk/types'
import { mergeBlocks } from '../../../shared/walk/merge'

/** A small seeded generator (mulberry32) for tests only. */
export function generator(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6D2B79F5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32
  }
}

interface Shape { classes?: 1 | 2, ready?: boolean, decline?: boolean }
function oneReplicate(replicate: number, { classes = 1, ready = false, decline = false }: Shape): ReplicateBlock {
  const random = generator(replicate + 1)
  const count = (top: number) => Math.floor(random() * top)
  const rows = (top: number) => Array.from({ length: classes }, () => Array.from({ length: 4 }, () => count(top)))
  const square = (table: number[][]) => table.map(row => row.map(value => value * value))
  const filledSum = rows(30), readySum = rows(9)
  const single = (top: number) => Array.from({ length: classes }, () => [count(top)])
  return {
    from: replicate, to: replicate + 1, filledSum, filledSumSq: square(filledSum),
    ...(classes === 2 ? { totalSumSq: filledSum[0]!.map((value, i) => (value + filledSum[1]![i]!) ** 2) } : {}),
    ...(ready ? { readySum, readySumSq: square(readySum) } : {}),
    firstAttachment: [count(5), count(5), count(5)], events: single(30), exposureSteps: single(5000),
    ...(decline ? { declinedExposure: single(5000 * 65536) } : {}),
  }
}

/** Replicates [from, to) as one block. */
export function syntheticBlock(from: number, to: number, shape: Shape = {}): ReplicateBlock {
  let block = oneReplicate(from, shape)
  for (let replicate = from + 1; replicate < to; replicate++) block = mergeBlocks(block, oneReplicate(replicate, shape))
  return block
}
