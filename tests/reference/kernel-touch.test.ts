/**
 * First-touch sampling against exact values, against an independent trial program (plain C, other generator, other code) and against the step-by-step walk,
 * at 4 joint standard errors with fixed seeds. R = mean attachment time over τ = Δt/p, p = s·ρa³/6.
 */
import { describe, expect, it } from 'vitest'
import type { WalkPlan } from '../../shared/walk/types'
import { distance, freePlate, freshKernel, meanFilled, meanTime, OCCUPANCY, onFloor, planOf, walk, type PlanWish } from './walk-support'

const kernel = await freshKernel()
const tauSteps = (s: number, occupancy = OCCUPANCY) => 6 / (s * occupancy)
const longRun = (s: number, occupancy = OCCUPANCY) => Math.ceil(40 * tauSteps(s, occupancy))
const sealed44 = (wish: PlanWish = {}) => planOf({ ...onFloor(6, 9, [44, 44, 44]), supply: 'sealed', steps: 652, ...wish })

describe('an isolated site in a held box of 21 × 21 × 11 voxels', () => {
  // Exact: survival exp(−Σ flux into an always-empty site), lattice solve.
  it.each([[1, 1.29567, 150_000], [0.5, 1.15504, 50_000], [0.1, 1.03324, 10_000]])('takes R of the exact solution at s = %s', (s, exact, replicates) => {
    const plan = planOf({ ...onFloor(1, 1, [21, 21, 11]), s, steps: longRun(s) })
    expect(distance(meanTime(walk(kernel, plan, 'touch', 'isolated', replicates), tauSteps(s)), exact)).toBeLessThan(4)
  })
})

describe('many sites', () => {
  // Trial program, first-touch engine: replicates 20,000 / 2,000 (sealed 44³), 6,000 (held), 500 (s = 0.01).
  it.each([
    ['sealed', [44, 44, 44], 1, 1.882, 0.0021, 3000], ['sealed', [44, 44, 44], 0.3, 1.3252, 0.0044, 1000],
    ['held', [12, 15, 8], 1, 1.86187, 0.00037, 30_000], ['held', [18, 21, 12], 1, 1.88, 0.0021, 4000], ['held', [30, 33, 20], 1, 1.8793, 0.0038, 3000],
    ['held', [24, 27, 16], 0.01, 1.0146, 0.0063, 60],
  ] as const)('54 on a wall, %s, %s voxels, s = %s: R = %s(%s)', (supply, box, s, reference, se, replicates) => {
    const plan = planOf({ ...onFloor(6, 9, [...box]), supply, s, steps: s < 0.1 ? 12_000 : longRun(s) })
    expect(distance(meanTime(walk(kernel, plan, 'touch', 'wall', replicates), tauSteps(s)), reference, se)).toBeLessThan(4)
  })
  // Trial program: sparser pools slow refill more.
  it.each([[0.05, 2.203, 0.006], [0.1, 2.052, 0.006], [0.4, 1.713, 0.005]])('54 on a wall at ρa³ = %s: R = %s(%s)', (occupancy, reference, se) => {
    const plan = sealed44({ occupancy, steps: longRun(1, occupancy) })
    expect(distance(meanTime(walk(kernel, plan, 'touch', 'density', 1000), tauSteps(1, occupancy)), reference, se)).toBeLessThan(4)
  })
  // Trial program, 20,000 (44³) and 3,000 (22³) replicates.
  it.each([[44, 1.8578, 0.0014, 2000], [22, 1.8571, 0.0038, 2000]])('both faces of a free plate in %s³: R = %s(%s)', (size, reference, se, replicates) => {
    const plan = planOf({ ...freePlate(9, 6, [size, size, size]), supply: 'sealed', steps: longRun(1) })
    expect(distance(meanTime(walk(kernel, plan, 'touch', 'plate', replicates), tauSteps(1)), reference, se)).toBeLessThan(4)
  })
  // Trial program, fill curve N(n) and its spread, seed 71, 20,000 replicates.
  it('54 on a wall fill along the reference curve', () => {
    const steps = [5, 15, 30, 60, 120, 240], curve = [6.618, 14.477, 22.883, 34.668, 47.307, 53.489], errors = [0.017, 0.024, 0.027, 0.028, 0.02, 0.005]
    const spread = [2.44, 3.36, 3.87, 3.91, 2.77, 0.75], replicates = 4000
    const blocks = walk(kernel, sealed44({ sampleSteps: Uint32Array.from([0, ...steps, 652]) }), 'touch', 'curve', replicates)
    steps.forEach((step, i) => {
      const one = meanFilled(blocks, i + 1)
      expect(distance(one, curve[i]!, errors[i]), `mean at ${step}`).toBeLessThan(4)
      expect(Math.abs(one.se * Math.sqrt(replicates) / spread[i]! - 1), `spread at ${step}`).toBeLessThan(4 / Math.sqrt(2 * replicates) + 0.005)
    })
  })
})

describe('against the step-by-step walk', () => {
  const two = (number: [number, number] | null) => [
    { share: 0.6, attachFactor: 1, mobilityFactor: 1, number: number && number[0] }, { share: 0.4, attachFactor: 0.5, mobilityFactor: 0.3, number: number && number[1] },
  ]
  const samples = Uint32Array.of(0, 3, 10, 25, 60, 110, 111, 150, 220)
  const rich: PlanWish = {
    steps: 220, sampleSteps: samples, initialFill: 0.2, releases: [{ step: 110, fraction: 0.8 }], decline: { restFactor: 0.3, perStep: 0.97 },
    detachPerStep: [0.01, 0.002], readyPerStep: [0.05, null], attachProbability: [[0.9, 0.45], [0.3, 0.15]],
  }
  const cases: Record<string, WalkPlan> = {
    'held wall': planOf({ ...onFloor(4, 3, [10, 9, 5]), ...rich, sitesPerClass: [5, 7], vesicles: two(null) }),
    'held plate': planOf({ ...freePlate(3, 2, [9, 8, 9]), ...rich, sitesPerClass: [5, 7], vesicles: two(null) }),
    'sealed plate': planOf({ ...freePlate(4, 3, [11, 10, 9]), ...rich, supply: 'sealed', sitesPerClass: [12, 12], vesicles: two([70, 50]) }),
    'sealed wall, one class': planOf({ ...onFloor(3, 3, [7, 7, 6]), supply: 'sealed', s: 0.6, steps: 220, sampleSteps: samples, releases: [{ step: 110, fraction: 1 }] }),
    'an immobile class': planOf({ ...onFloor(3, 3, [7, 7, 6]), steps: 220, sampleSteps: samples, attachProbability: [[0.6, 0.6]], vesicles: [{ share: 0.5, attachFactor: 1, mobilityFactor: 1, number: null }, { share: 0.5, attachFactor: 1, mobilityFactor: 0, number: null }] }),
  }
  it.each(Object.keys(cases))('%s: same law', (name) => {
    const plan = cases[name]!, replicates = 4000
    const touch = walk(kernel, plan, 'touch', 'law', replicates), step = walk(kernel, plan, 'step', 'other seed', replicates)
    plan.sitesPerClass.forEach((_, siteClass) => {
      for (const what of plan.readyPerStep[0] === null ? ['filled'] as const : ['filled', 'ready'] as const)
        samples.forEach((at, i) => {
          const one = meanFilled(touch, i, siteClass, what), other = meanFilled(step, i, siteClass, what)
          expect(Math.abs(one.value - other.value), `${what} of class ${siteClass} at ${at}`).toBeLessThanOrEqual(4 * Math.hypot(one.se, other.se))
        })
      const one = meanTime(touch, 1, siteClass), other = meanTime(step, 1, siteClass)
      expect(Math.abs(one.value - other.value)).toBeLessThan(4 * Math.hypot(one.se, other.se))
    })
  })
})

describe('tables', () => {
  const plan = sealed44({ steps: 200, sampleSteps: Uint32Array.of(0, 50, 200) })
  it('handed to another kernel give the same blocks, and are not built there', async () => {
    const maker = kernel.prepare(plan, 'touch'), tables = maker.exportTables()!
    expect(tables.byteLength).toBe(16 + maker.tableBytes)
    const taker = (await freshKernel()).prepare(plan, 'touch')
    taker.adoptTables(tables)
    expect(taker.run(7, 8, 0, 60)).toEqual(maker.run(7, 8, 0, 60))
    // Tables that expect no arrival at all: a kernel that built its own would attach.
    const barren = tables.slice(0)
    new Float64Array(barren, 8, 1)[0] = 0
    const idle = (await freshKernel()).prepare(plan, 'touch')
    idle.adoptTables(barren)
    expect(idle.run(7, 8, 0, 60).events[0]).toEqual(new Array(60).fill(0))
  })
  it('of another plan are refused', () => {
    const other = kernel.prepare(sealed44({ steps: 201 }), 'touch')
    expect(() => other.adoptTables(kernel.prepare(plan, 'touch').exportTables()!)).toThrow(RangeError)
  })
  it('serve every density, probability and protocol of a geometry', () => {
    const dense = sealed44({ steps: 200, sampleSteps: Uint32Array.of(0, 200), occupancy: 0.3, s: 0.4 })
    const alone = kernel.prepare(dense, 'touch').run(1, 1, 0, 10)
    kernel.prepare(plan, 'touch').run(1, 1, 0, 10)
    expect(kernel.prepare(dense, 'touch').run(1, 1, 0, 10)).toEqual(alone)
  })
  it('do not make results depend on how replicates are cut into calls', () => {
    const prepared = kernel.prepare(plan, 'touch'), whole = prepared.run(3, 9, 0, 30), tail = prepared.run(3, 9, 17, 30)
    expect(whole.exposureSteps[0]!.slice(17)).toEqual(tail.exposureSteps[0])
  })
})
