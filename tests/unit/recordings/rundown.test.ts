/** Run-down of the first response: lines through known series, intervals by Student's t (0.975, 8 degrees: 2.306; printed tables). */
import { describe, expect, it } from 'vitest'
import { read, warningIds } from './support'
import { correctRunDown, runDownOf } from '../../../shared/recordings/rundown'
import type { CellPoint } from '../../../shared/recordings/types'

const cellOf = (cell: string, firsts: (number | null)[], ratio = 0.5): CellPoint[] => firsts.map((first, i) => ({ cell, intervalMs: 50 * 2 ** i, ratio, first, aside: null, line: i + 2 }))

describe('run-down', () => {
  it('is the change of the line over the series', () => {
    const [run] = runDownOf(cellOf('A', Array.from({ length: 11 }, (_, i) => 300 - 6 * i)))
    expect(run).toMatchObject({ cell: 'A', measured: 11, clear: true })
    expect(run!.change).toBeCloseTo(-0.2, 12)
    expect(run!.high! - run!.low!).toBeCloseTo(0, 9)
  })
  it('has an interval from the scatter about the line', () => {
    // Ten values 100 ± 1 in turn: slope 5·(−1 …) from Σ(x−x̄)y/82.5, residuals by hand below.
    const firsts = Array.from({ length: 10 }, (_, i) => 100 + (i % 2 ? 1 : -1)), [run] = runDownOf(cellOf('A', firsts))
    const slope = 5 / 82.5, rest = 10 - slope * slope * 82.5, start = 100 - 4.5 * slope
    const error = Math.sqrt(rest / 8 / 82.5)
    expect(run!.change).toBeCloseTo(9 * slope / start, 10)
    expect((run!.high! - run!.low!) / 2).toBeCloseTo(2.306 * error * 9 / start, 4)
    expect(run!.clear).toBe(false)
  })
  it('needs three first responses, and leaves out what is set aside or missing', () => {
    expect(runDownOf(cellOf('A', [300, null, 280]))).toMatchObject([{ measured: 2, change: null, clear: false }])
    const cells = cellOf('A', [300, 290, 10, 270, 260]).map((one, i) => i === 2 ? { ...one, aside: 'bad seal' } : one)
    expect(runDownOf(cells)[0]!.measured).toBe(4)
    expect(runDownOf(cellOf('A', [0, 0, 0]))).toMatchObject([{ change: null, clear: false }])
  })
  it('is taken out only where it is clear: second over the line in place of second over the single first', () => {
    const falling = Array.from({ length: 11 }, (_, i) => 300 - 6 * i + (i % 2 ? 3 : -3)), cells = [...cellOf('A', falling), ...cellOf('B', falling.map((_, i) => 300 + (i % 2 ? 3 : -3)))]
    const { cells: mended, corrected } = correctRunDown(cells), line = runDownOf(cells)[0]!.points
    expect(corrected).toEqual(['A'])
    mended.slice(0, 11).forEach((one, i) => expect(one.ratio! * line[i]!.fitted).toBeCloseTo(0.5 * falling[i]!, 10))
    expect(mended.slice(11)).toEqual(cells.slice(11))
  })
  it('is told with a reading, and its correction is a choice', () => {
    const text = ['cell,interval_ms,response1_pA,response2_pA', ...Array.from({ length: 8 }, (_, i) => `A,${50 * 2 ** i},${300 - 10 * i + i % 2},${100 + 20 * i}`)].join('\n')
    const reading = read(text)
    expect(reading.warnings.find(one => one.id === 'run-down')!.sentence).toBe('recording: the first response changes over the series in 1 of 1 cells (A by -23 %).')
    const corrected = read(text, { runDown: 'corrected' })
    expect(warningIds(corrected)).not.toContain('run-down')
    expect(corrected.conditions[0]!.cells[1]!.ratio).not.toBe(reading.conditions[0]!.cells[1]!.ratio)
    expect(corrected.conditions[0]!.cells[1]!.ratio).toBeCloseTo(120 / runDownOf(reading.conditions[0]!.cells)[0]!.points[1]!.fitted, 10)
  })
})
