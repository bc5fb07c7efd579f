/**
 * Attempt-to-attempt sampling against exact values, against an independent trial program (plain C, other generator, other code), against first touches and against the step-by-step walk,
 * at 4 joint standard errors with fixed seeds. R = mean attachment time over τ = Δt/p, p = s·ρa³/6.
 */
import { describe, expect, it } from 'vitest'
import type { WalkPlan } from '../../shared/walk/types'
import { referenceKernel } from '../../workers/reference/walk'
import { distance, freePlate, freshKernel, meanFilled, meanTime, OCCUPANCY, onFloor, planOf, walk, type PlanWish } from './walk-support'

const kernel = await freshKernel()
const tauSteps = (s: number, occupancy = OCCUPANCY) => 6 / (s * occupancy)
const longRun = (s: number, occupancy = OCCUPANCY) => Math.ceil(40 * tauSteps(s, occupancy))
const sealed44 = (wish: PlanWish = {}) => planOf({ ...onFloor(6, 9, [44, 44, 44]), supply: 'sealed', steps: 652, ...wish })

describe('an isolated site in a held box of 21 × 21 × 11 voxels', () => {
  // Exact: survival exp(−Σ flux into an always-empty site), lattice solve.
  it.each([[1, 1.29567, 400_000], [0.5, 1.15504, 200_000], [0.1, 1.03324, 50_000]])('takes R of the exact solution at s = %s', (s, exact, replicates) => {
    const plan = planOf({ ...onFloor(1, 1, [21, 21, 11]), s, steps: longRun(s) })
    expect(distance(meanTime(walk(kernel, plan, 'attempt', 'isolated', replicates), tauSteps(s)), exact)).toBeLessThan(4)
  })
})

describe('many sites', () => {
  // Trial program, first-touch engine: replicates 20,000 / 2,000 / 1,200 (sealed 44³), 6,000 (held), 500 (s = 0.01).
  it.each([
    ['sealed', [44, 44, 44], 1, 1.882, 0.0021, 20_000], ['sealed', [44, 44, 44], 0.3, 1.3252, 0.0044, 10_000], ['sealed', [44, 44, 44], 0.1, 1.1317, 0.0045, 4000],
    ['held', [12, 15, 8], 1, 1.86187, 0.00037, 100_000], ['held', [18, 21, 12], 1, 1.88, 0.0021, 20_000], ['held', [30, 33, 20], 1, 1.8793, 0.0038, 10_000],
    ['held', [24, 27, 16], 0.01, 1.0146, 0.0063, 500],
  ] as const)('54 on a wall, %s, %s voxels, s = %s: R = %s(%s)', (supply, box, s, reference, se, replicates) => {
    const plan = planOf({ ...onFloor(6, 9, [...box]), supply, s, steps: s < 0.1 ? 12_000 : longRun(s) })
    expect(distance(meanTime(walk(kernel, plan, 'attempt', 'wall', replicates), tauSteps(s)), reference, se)).toBeLessThan(4)
  })
  // Trial program, 20,000 (44³) and 3,000 (22³) replicates.
  it.each([[44, 1.8578, 0.0014, 10_000], [22, 1.8571, 0.0038, 10_000]])('both faces of a free plate in %s³: R = %s(%s)', (size, reference, se, replicates) => {
    const plan = planOf({ ...freePlate(6, 9, [size, size, size]), supply: 'sealed', steps: longRun(1) })
    expect(distance(meanTime(walk(kernel, plan, 'attempt', 'plate', replicates), tauSteps(1)), reference, se)).toBeLessThan(4)
  })
  // Trial program, fill curve N(n) and its spread, seed 71, 20,000 replicates.
  it('54 on a wall fill along the reference curve', () => {
    const steps = [5, 15, 30, 60, 120, 240], curve = [6.618, 14.477, 22.883, 34.668, 47.307, 53.489], errors = [0.017, 0.024, 0.027, 0.028, 0.02, 0.005]
    const spread = [2.44, 3.36, 3.87, 3.91, 2.77, 0.75], replicates = 20_000
    const blocks = walk(kernel, sealed44({ sampleSteps: Uint32Array.from([0, ...steps, 652]) }), 'attempt', 'curve', replicates)
    steps.forEach((step, i) => {
      const one = meanFilled(blocks, i + 1)
      expect(distance(one, curve[i]!, errors[i]), `mean at ${step}`).toBeLessThan(4)
      expect(Math.abs(one.se * Math.sqrt(replicates) / spread[i]! - 1), `spread at ${step}`).toBeLessThan(4 / Math.sqrt(2 * replicates) + 0.005)
    })
  })
  // Trial program, first-touch engine, 300 replicates: 10.098(71); sites still empty at the end count with the whole run.
  it('96 on two faces of two kinds recover in 60 s as the trial program\'s do', () => {
    const plan = planOf({ ...freePlate(6, 8, [40, 40, 40]), supply: 'sealed', occupancy: 0.1, steps: 14_400, attachProbability: [[0.3], [0.0125]] })
    // The trial program numbers faces alternately and takes every site with 37j mod 100 below 60 as quick.
    const classOfSite = Uint8Array.from({ length: 96 }, (_, i) => (i < 48 ? 2 * i : 2 * (i - 48) + 1) * 37 % 100 < 60 ? 0 : 1)
    const slow = classOfSite.reduce((sum, one) => sum + one, 0)
    const blocks = walk(kernel, { ...plan, classOfSite, sitesPerClass: [96 - slow, slow], detachPerStep: [0, 0], readyPerStep: [null, null] }, 'attempt', 'long', 800)
    const times = blocks.flatMap(block => block.exposureSteps[0]!.map((quick, k) => (quick + block.exposureSteps[1]![k]!) / 96 / tauSteps(0.3, 0.1)))
    const mean = times.reduce((sum, one) => sum + one, 0) / times.length
    const se = Math.sqrt(times.reduce((sum, one) => sum + (one - mean) ** 2, 0) / (times.length - 1) / times.length)
    expect(distance({ value: mean, se }, 10.098, 0.071)).toBeLessThan(4)
  })
})

const samples = Uint32Array.of(0, 3, 10, 25, 60, 110, 111, 150, 220)
const two = (number: [number, number] | null) => [
  { share: 0.6, attachFactor: 1, mobilityFactor: 1, number: number && number[0] }, { share: 0.4, attachFactor: 0.5, mobilityFactor: 0.3, number: number && number[1] },
]
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
  'sites that let go at once': planOf({ ...onFloor(3, 2, [8, 7, 5]), steps: 220, sampleSteps: samples, s: 1, detachPerStep: [0.5] }),
  'two factors, one pace': planOf({ ...freePlate(3, 3, [9, 9, 8]), supply: 'sealed', steps: 220, sampleSteps: samples, attachProbability: [[0.8, 0.1]], vesicles: [{ share: 0.5, attachFactor: 1, mobilityFactor: 1, number: 30 }, { share: 0.5, attachFactor: 0.125, mobilityFactor: 1, number: 30 }] }),
}

/** Every mean that a block carries, of one walk against another, at 4 joint standard errors. */
function expectSameLaw(plan: WalkPlan, one: ReturnType<typeof walk>, other: ReturnType<typeof walk>): void {
  plan.sitesPerClass.forEach((_, siteClass) => {
    for (const what of plan.readyPerStep.some(chance => chance !== null) ? ['filled', 'ready'] as const : ['filled'] as const)
      plan.sampleSteps.forEach((at, i) => {
        const a = meanFilled(one, i, siteClass, what), b = meanFilled(other, i, siteClass, what)
        expect(Math.abs(a.value - b.value), `${what} of class ${siteClass} at ${at}`).toBeLessThanOrEqual(4 * Math.hypot(a.se, b.se))
      })
    const a = meanTime(one, 1, siteClass), b = meanTime(other, 1, siteClass)
    expect(Math.abs(a.value - b.value), `exposure over attachments of class ${siteClass}`).toBeLessThan(4 * Math.hypot(a.se, b.se))
    const firsts = [one, other].map(blocks => blocks.reduce((sum, block) => sum + block.firstAttachment.reduce((x, y) => x + y, 0), 0))
    expect(Math.abs(firsts[0]! - firsts[1]!)).toBeLessThanOrEqual(4 * Math.sqrt(firsts[0]! + firsts[1]!))
    if (plan.decline) {
      const [x, y] = [one, other].map(blocks => blocks.reduce((sum, block) => sum + block.declinedExposure![siteClass]!.reduce((p, q) => p + q, 0) / block.exposureSteps[siteClass]!.reduce((p, q) => p + q, 0), 0) / blocks.length)
      expect(Math.abs(x! / y! - 1)).toBeLessThan(0.02)
    }
  })
}

describe('with every feature', () => {
  it.each(Object.keys(cases))('%s: the law of the step-by-step walk', (name) => {
    expectSameLaw(cases[name]!, walk(kernel, cases[name]!, 'attempt', 'law', 4000), walk(kernel, cases[name]!, 'step', 'other seed', 4000))
  })
  it('the law of the plain TypeScript walk', () => {
    const plan = cases['held wall']!
    expectSameLaw(plan, walk(kernel, plan, 'attempt', 'plain', 600), walk(referenceKernel, plan, 'step', 'plain too', 600))
  })
  it('the mean of first touches over 100,000 replicates', () => {
    const plan = planOf({ ...freePlate(4, 3, [16, 16, 16]), supply: 'sealed', occupancy: 0.1, steps: 150, sampleSteps: Uint32Array.of(0, 5, 20, 60, 150), releases: [{ step: 60, fraction: 1 }] })
    expectSameLaw(plan, walk(kernel, plan, 'attempt', 'many', 100_000), walk(kernel, plan, 'touch', 'many others', 100_000))
  })
})
