/** The run's book: whatever the order and the losses, the blocks are those of a straight walk. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { RunBook, type Task } from '../../../workers/run-book'
import { Pace } from '../../../workers/pace'
import { reachableCap, regroup, targetRanges } from '../../../workers/target'
import { blockRanges, mergeAll } from '../../../shared/walk/merge'
import { syntheticBlock } from '../outcome/support'

describe('RunBook', () => {
  it('any order of chunks, any chunk size, any chunk lost and repeated: same blocks, and always a contiguous prefix', () => {
    const ranges = blockRanges(120), straight = ranges.map(({ from, to }) => syntheticBlock(from, to))
    fc.assert(fc.property(fc.array(fc.tuple(fc.integer({ min: 1, max: 40 }), fc.nat(), fc.boolean()), { minLength: 300, maxLength: 300 }), (moves) => {
      const book = new RunBook(ranges), held: Task[] = []
      for (const [size, pick, loses] of moves) {
        if (held.length < 3) {
          const task = book.take(size)
          if (task) held.push(task)
        }
        if (held.length === 0) break
        if (pick % 3 === 0) continue
        const [task] = held.splice(pick % held.length, 1) as [Task]
        if (loses && task.failures < 1) book.giveBack({ ...task, failures: task.failures + 1 })
        else book.enter(task, syntheticBlock(task.from, task.to))
        const prefix = book.prefix()
        if (prefix.length > 0) expect(mergeAll(prefix)).toMatchObject({ from: 0, to: prefix.at(-1)!.to })
      }
      if (book.replicatesDone === 120) expect(book.wholeBlocks()).toEqual(straight)
      else expect(straight.slice(0, book.wholeBlocks().length)).toEqual(book.wholeBlocks())
    }), { numRuns: 30 })
  })

  it('hands out replicates in order, so that a stop loses only what is held', () => {
    const book = new RunBook(blockRanges(100))
    const [first, second, third] = [book.take(20)!, book.take(20)!, book.take(20)!]
    expect([first, second, third].map(({ from, to }) => [from, to])).toEqual([[0, 20], [20, 40], [40, 50]])
    book.enter(second, syntheticBlock(20, 40))
    expect(book.prefix()).toEqual([])
    book.enter(first, syntheticBlock(0, 20))
    expect(book.prefix()).toEqual([syntheticBlock(0, 40)])
    expect(book.take(20)).toMatchObject({ block: 1, from: 50, to: 70 })
  })
})

describe('target ranges', () => {
  it.each([[70, 70], [20_000, 20_000], [39_999, 20_000], [40_000, 40_000], [50_000, 40_000], [1_000_000, 640_000]])('a cap of %i reaches %i; wherever it may stop, its blocks join to those of a plain run', (cap, reached) => {
    expect(reachableCap(cap)).toBe(reached)
    const ranges = targetRanges(cap)
    expect(ranges.at(-1)!.to).toBe(reached)
    ranges.slice(1).forEach((range, i) => expect(range.from).toBe(ranges[i]!.to))
    for (let stop = 20_000; stop <= reached; stop *= 2) {
      const ends = new Set(ranges.map(range => range.to))
      for (const { to } of blockRanges(stop)) expect(ends.has(to)).toBe(true)
    }
  })
  it('regroup joins neighbours up to a size', () => {
    const pieces = [syntheticBlock(0, 2), syntheticBlock(2, 4), syntheticBlock(4, 6), syntheticBlock(6, 7)]
    expect(regroup(pieces, 4)).toEqual([syntheticBlock(0, 4), syntheticBlock(4, 7)])
  })
})

describe('Pace', () => {
  it('asks for what takes about 150 ms, few at first, never more than 50, never less than one', () => {
    const pace = new Pace(1)
    expect(pace.chunk()).toBe(10)
    pace.note(10, 30)
    expect(pace.chunk()).toBe(50)
    expect(new Pace(1000).chunk()).toBe(1)
    pace.note(10, 10_000)
    expect(pace.chunk()).toBeLessThan(2)
  })
  it('tells the time left from the measured pace, and waits patiently for slow replicates', () => {
    const pace = new Pace(5)
    expect(pace.remainingMs(100, 2)).toBeNull()
    expect(pace.factor).toBeNull()
    pace.note(10, 100)
    expect(pace.remainingMs(100, 2)).toBeCloseTo(500, 6)
    expect(pace.factor).toBeCloseTo(2, 6)
    expect(new Pace(60_000).patienceMs(1)).toBeGreaterThan(600_000)
    expect(pace.patienceMs(1)).toBe(30_000)
  })
})
