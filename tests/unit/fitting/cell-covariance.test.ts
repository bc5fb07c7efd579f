/** The covariance of cells: what it measures on drawn cells of known spread, and that it whitens. */
import { describe, expect, it } from 'vitest'
import { cellDirections, cellRows, cellVariance, whitening } from '../../../shared/fitting/cell-covariance'
import { BENCH_NOISE, simulateCondition } from '../../../shared/fitting/weighing/simulate-cells'
import { Stream, stateOf } from '../../../shared/walk/streams'

const TIMES = Float64Array.from({ length: 11 }, (_, i) => 0.05 * 2 ** i)
const draw = (set: number, rateSd: number, depletionSd: number, cells = 9) => [0, 1, 2, 3].map(k => simulateCondition(
  { condition: `c${k}`, protocol: 'long', manipulation: 'none', explanation: 'site-kinds', parameters: [0.6, 1.2, 0.05], depletion: 0.8, cells }, TIMES, new Stream(stateOf(set, k, 7)), { ...BENCH_NOISE, rateSd, depletionSd }))
const directionsOf = (conditions: ReturnType<typeof draw>) => conditions.map(({ points }) => cellDirections(Float64Array.from(points, one => one.intervalMs / 1000), Float64Array.from(points, one => one.ratio), Float64Array.from(points, one => 0.03 / Math.sqrt(one.n!))))
const median = (values: number[]) => values.sort((a, b) => a - b)[Math.floor(values.length / 2)]!

describe('covariance of cells', () => {
  it.each([[0.2, 0.04], [0.08, 0.02], [0.3, 0]])('recovers a spread of rates of %f and of depletion of %f between cells', (rateSd, depletionSd) => {
    const found = Array.from({ length: 21 }, (_, set) => {
      const conditions = draw(set + 1, rateSd, depletionSd)
      return cellVariance(conditions, directionsOf(conditions))!
    })
    expect(found.every(one => one.dof === 32)).toBe(true)
    expect(Math.abs(median(found.map(one => one.kappa)) - rateSd)).toBeLessThan(0.025)
    expect(Math.abs(median(found.map(one => one.delta)) - depletionSd)).toBeLessThan(0.01)
    // Site noise of 576 sites and 0.025 of measurement: 0.025 to 0.033 along the curve.
    expect(median(found.map(one => one.sigma))).toBeGreaterThan(0.027)
    expect(median(found.map(one => one.sigma))).toBeLessThan(0.034)
  })

  it('tells nothing from one cell each, or from too few points', () => {
    const conditions = draw(1, 0.1, 0.02, 1)
    expect(cellVariance(conditions, directionsOf(conditions))).toBeNull()
  })

  it('the inverse factor turns V into the identity', () => {
    const [condition] = draw(3, 0.1, 0.02), [directions] = directionsOf([condition!]), n = 11, errors = new Float64Array(n).fill(0.01), factor = whitening(errors, directions!, 0.1, 0.025, 9)
    const V = (i: number, j: number) => (0.01 * directions!.byRate[i]! * directions!.byRate[j]! + 0.025 ** 2 * directions!.byDepletion[i]! * directions!.byDepletion[j]!) / 9 + (i === j ? 1e-4 : 0)
    for (let a = 0; a < n; a++) for (let b = 0; b < n; b++) {
      let sum = 0
      for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) sum += factor[a * n + i]! * V(i, j) * factor[b * n + j]!
      expect(sum).toBeCloseTo(a === b ? 1 : 0, 10)
    }
  })

  it('lost cells and those set aside do not count; repeats of one cell are averaged', () => {
    const at = (cell: string, ratio: number | null, aside: string | null = null) => ({ cell, intervalMs: 100, ratio, first: null, aside, line: null })
    expect(cellRows([at('a', 0.2), at('a', 0.4), at('b', null), at('c', 0.9, 'slipped')], Float64Array.of(0.1))).toEqual([{ at: [0], values: [expect.closeTo(0.3, 12)] }])
  })
})
