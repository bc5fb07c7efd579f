/** Merging of blocks: associative, independent of order, and never silent about a gap. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { blockRanges, blockSize, contiguousPrefix, mergeAll, mergeBlocks } from '../../../shared/walk/merge'
import { syntheticBlock } from './support'

describe('blockRanges', () => {
  it.each([[1, 50, 1], [50, 50, 1], [51, 50, 2], [20_000, 50, 400], [20_001, 51, 393], [1_000_000, 2500, 400]])('%i replicates: blocks of %i, %i of them', (replicates, size, blocks) => {
    expect(blockSize(replicates)).toBe(size)
    const ranges = blockRanges(replicates)
    expect(ranges).toHaveLength(blocks)
    expect(ranges[0]!.from).toBe(0)
    expect(ranges.at(-1)!.to).toBe(replicates)
    ranges.slice(1).forEach((range, i) => expect(range.from).toBe(ranges[i]!.to))
  })
})

const cuts = fc.uniqueArray(fc.integer({ min: 1, max: 39 }), { minLength: 1, maxLength: 8 }).map(list => [0, ...list.sort((a, b) => a - b), 40])

describe('mergeAll', () => {
  it('gives the same block however the replicates were cut and in whatever order the pieces came', () => {
    const whole = syntheticBlock(0, 40, { classes: 2, ready: true, decline: true })
    fc.assert(fc.property(cuts.chain(edges => fc.tuple(fc.constant(edges), fc.shuffledSubarray(edges.slice(1).map((_, i) => i), { minLength: edges.length - 1 }))), ([edges, order]) => {
      const pieces = edges.slice(1).map((to, i) => syntheticBlock(edges[i]!, to, { classes: 2, ready: true, decline: true }))
      expect(mergeAll(order.map(i => pieces[i]!))).toEqual(whole)
    }))
  })
  it('is associative', () => {
    const [a, b, c] = [syntheticBlock(0, 5), syntheticBlock(5, 6), syntheticBlock(6, 20)] as const
    expect(mergeBlocks(mergeBlocks(a, b), c)).toEqual(mergeBlocks(a, mergeBlocks(b, c)))
  })
  it('refuses a gap, an overlap and unlike blocks', () => {
    expect(() => mergeAll([syntheticBlock(0, 5), syntheticBlock(6, 7)])).toThrow(/do not touch/)
    expect(() => mergeAll([syntheticBlock(0, 5), syntheticBlock(4, 7)])).toThrow(/do not touch/)
    expect(() => mergeBlocks(syntheticBlock(0, 5), syntheticBlock(5, 7, { classes: 1, ready: true }))).toThrow(/only one block/)
    expect(() => mergeBlocks(syntheticBlock(0, 5), syntheticBlock(5, 7, { classes: 2 }))).toThrow(RangeError)
    expect(() => mergeAll([])).toThrow(/no blocks/)
  })
})

it('contiguousPrefix stops at the first gap', () => {
  const blocks = [syntheticBlock(10, 20), syntheticBlock(0, 10), syntheticBlock(30, 40)]
  expect(contiguousPrefix(blocks).map(block => [block.from, block.to])).toEqual([[0, 10], [10, 20]])
  expect(contiguousPrefix([syntheticBlock(5, 6)])).toEqual([])
})
