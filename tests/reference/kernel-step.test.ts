/**
 * The step-by-step and stirred walks against exact laws and against the values of an independent trial program (plain C, other generator, other code),
 * at 4 joint standard errors with fixed seeds. R = mean attachment time over τ = Δt/p, p = s·ρa³/6.
 */
import { describe, expect, it } from 'vitest'
import type { WalkPlan } from '../../shared/walk/types'
import { distance, freePlate, freshKernel, meanFilled, meanTime, OCCUPANCY, onFloor, planOf, walk, type PlanWish } from './walk-support'

const kernel = await freshKernel()
const tauSteps = (s: number) => 6 / (s * OCCUPANCY)
/** Long enough that every site fills. */
const longRun = (s: number) => Math.ceil(40 * tauSteps(s))

describe('an isolated site in a held box of 21 × 21 × 11 voxels', () => {
  const isolated = onFloor(1, 1, [21, 21, 11])
  // Exact: survival exp(−Σ flux into an always-empty site), lattice solve.
  it.each([[1, 1.29567, 5000], [0.5, 1.15504, 4000], [0.1, 1.03324, 700]])('takes R of the exact solution at s = %s', (s, exact, replicates) => {
    const plan = planOf({ ...isolated, s, steps: longRun(s) })
    expect(distance(meanTime(walk(kernel, plan, 'step', 'isolated', replicates), tauSteps(s)), exact)).toBeLessThan(4)
  })
  // Trial program, full walk with exclusion: 1.2252(86) and 1.2266(88), 20,000 replicates each.
  it('fills a little sooner under exclusion', () => {
    const plan = planOf({ ...isolated, crowding: 'exclusive', steps: longRun(1) })
    expect(distance(meanTime(walk(kernel, plan, 'step', 'isolated', 4000), tauSteps(1)), 1.2259, 0.0062)).toBeLessThan(4)
  })
})

describe('54 sites on a wall', () => {
  // Trial program, full walk, independent: 30,000 and 20,000 replicates; closed 24³ 6,000.
  it.each([
    ['held', [12, 15, 8], 1.8623, 0.0017, 1500], ['held', [18, 21, 12], 1.88, 0.0021, 800], ['sealed', [24, 24, 24], 1.8887, 0.0038, 400],
  ] as const)('%s box of %s voxels: R = %s(%s)', (supply, box, reference, se, replicates) => {
    const plan = planOf({ ...onFloor(6, 9, [...box]), supply, steps: longRun(1) })
    expect(distance(meanTime(walk(kernel, plan, 'step', 'wall', replicates), tauSteps(1)), reference, se)).toBeLessThan(4)
  })
  // Trial program, full walk with exclusion, 2,000 replicates each.
  it.each([['held', [18, 21, 12], 1.8001, 0.006, 500], ['sealed', [24, 24, 24], 1.8065, 0.0062, 250]] as const)('%s box of %s voxels under exclusion: R = %s(%s)', (supply, box, reference, se, replicates) => {
    const plan = planOf({ ...onFloor(6, 9, [...box]), supply, crowding: 'exclusive', steps: longRun(1) })
    expect(distance(meanTime(walk(kernel, plan, 'step', 'wall', replicates), tauSteps(1)), reference, se)).toBeLessThan(4)
  })
})

// Trial program, 6,000 replicates: with an exchange that lets every vesicle out the bath would be too thin and R 1.133.
it('keeps the density of a held bath under exclusion: R = 1.0139(130) at s = 0.1 in 15 × 15 × 8 voxels', () => {
  const plan = planOf({ ...onFloor(1, 1, [15, 15, 8]), s: 0.1, crowding: 'exclusive', steps: longRun(0.1) })
  const estimate = meanTime(walk(kernel, plan, 'step', 'bath', 900), tauSteps(0.1))
  expect(distance(estimate, 1.0139, 0.013)).toBeLessThan(4)
  expect(estimate.value).toBeLessThan(1.133)
})

// Trial program, first-touch engine, cube 22³, N = 2,133, 3,000 replicates; both faces 9 × 6.
it('fills both faces of a free plate: R = 1.8571(38)', () => {
  const plan = planOf({ ...freePlate(9, 6, [22, 22, 22]), supply: 'sealed', steps: longRun(1) })
  expect(plan.vesicles[0]!.number).toBe(2133)
  expect(distance(meanTime(walk(kernel, plan, 'step', 'plate', 250), tauSteps(1)), 1.8571, 0.0038)).toBeLessThan(4)
})

describe('a stirred supply', () => {
  const sites = 60, steps = 400
  const stirred = (wish: PlanWish): WalkPlan => planOf({ supply: 'stirred', siteCount: sites, steps, sampleSteps: Uint32Array.of(0, 10, 40, 100, steps), ...wish })
  const estimates = (plan: WalkPlan, what: 'filled' | 'ready' = 'filled') => {
    const blocks = walk(kernel, plan, 'stirred', 'stirred', 1500)
    return Array.from(plan.sampleSteps, (step, i) => ({ step, ...meanFilled(blocks, i, 0, what) }))
  }
  /** Filled and ready share of a site at every index, by the walk's own order of events; `factor(n)` multiplies p. */
  function exactCourse(plan: WalkPlan, factor: (n: number) => number = () => 1): { filled: number, ready: number }[] {
    const p = plan.occupancy / 6 * plan.attachProbability[0]![0]!, q = plan.readyPerStep[0]!, d = plan.detachPerStep[0]!
    let captured = 0, ready = plan.initialFill
    return Array.from({ length: plan.steps + 1 }, (_, n) => {
      const now = { filled: captured + ready, ready }
      for (const release of plan.releases) if (release.step === n) ready *= 1 - release.fraction
      captured *= 1 - d
      ready *= 1 - d
      if (q !== null) [captured, ready] = [captured * (1 - q), ready + captured * q]
      const attached = (1 - captured - ready) * Math.min(1, p * factor(n))
      if (q === null) ready += attached
      else captured += attached
      return now
    })
  }
  function expectCourse(plan: WalkPlan, factor?: (n: number) => number) {
    const course = exactCourse(plan, factor)
    for (const what of plan.readyPerStep[0] === null ? ['filled'] as const : ['filled', 'ready'] as const)
      for (const one of estimates(plan, what)) {
        const exact = sites * course[one.step]![what]
        expect(Math.abs(one.value - exact), `${what} at ${one.step}`).toBeLessThanOrEqual(4 * one.se + 1e-9 + (one.se === 0 ? 1e-2 : 0))
      }
  }

  // Exact: P(empty after n) = (1 − p)ⁿ, mean waiting time 1/p.
  it.each([1, 0.1])('has the mean waiting time of the closed form at s = %s', (s) => {
    const blocks = walk(kernel, planOf({ supply: 'stirred', siteCount: 54, s, steps: longRun(s) }), 'stirred', 'closed form', 400)
    expect(distance(meanTime(blocks, tauSteps(s)), 1)).toBeLessThan(4)
  })
  it('fills as 1 − (1 − p)ⁿ', () => expectCourse(stirred({ s: 0.3 })))
  // W-12: variance N·P(1 − P) of a binomial number (standard).
  it('has the binomial noise of independent sites', () => {
    const blocks = walk(kernel, stirred({ s: 0.3 }), 'stirred', 'noise', 4000), filled = 1 - (1 - 0.3 * OCCUPANCY / 6) ** 100
    const sum = blocks.reduce((all, block) => all + block.filledSum[0]![3]!, 0), squares = blocks.reduce((all, block) => all + block.filledSumSq[0]![3]!, 0)
    const variance = squares / 4000 - (sum / 4000) ** 2, expected = sites * filled * (1 - filled)
    expect(Math.abs(variance / expected - 1)).toBeLessThan(4 * Math.sqrt(2 / 4000))
  })
  it('starts from the initial fill and empties at releases', () =>
    expectCourse(stirred({ s: 0.5, initialFill: 0.3, releases: [{ step: 20, fraction: 0.7 }, { step: 90, fraction: 1 }, { step: 95, fraction: 0.5 }] })))
  // Well mixed: P(empty) = exp(−D·ρ·a·s·∫factor) in the limit of small p; here the product over steps.
  it('slows down under decline, anew after each release', () => {
    const decline = { restFactor: 0.1, perStep: 0.98 }
    expectCourse(stirred({ s: 0.8, decline, releases: [{ step: 60, fraction: 0.5 }] }), n => 0.1 + 0.9 * 0.98 ** (n < 60 ? n : n - 60))
  })
  it('captures first and readies later; releases empty ready sites only', () =>
    expectCourse(stirred({ s: 0.5, readyPerStep: [0.03], releases: [{ step: 50, fraction: 1 }] })))
  // W-15: F = 1 − (k₂e^{−k₁t} − k₁e^{−k₂t})/(k₂ − k₁) (standard); steps of 1/500 leave 4e-3.
  it('readies as two steps in a row do', () => {
    const plan = planOf({ supply: 'stirred', siteCount: 200, occupancy: 6 * 1.25 / 500, readyPerStep: [4 / 500], steps: 1000, sampleSteps: Uint32Array.of(0, 50, 250, 500, 1000) })
    const blocks = walk(kernel, plan, 'stirred', 'priming', 400)
    const published = [0, 0.021059072, 0.28295396, 0.59159104, 0.88075612]
    published.forEach((share, i) => {
      const one = meanFilled(blocks, i, 0, 'ready')
      expect(Math.abs(one.value / 200 - share)).toBeLessThan(4 * one.se / 200 + 0.004)
    })
  })
  it('settles at the discrete balance of attachment and detachment', () => {
    const plan = stirred({ s: 0.5, detachPerStep: [0.02], steps: 1200, sampleSteps: Uint32Array.of(0, 100, 1000, 1200) })
    expectCourse(plan)
    const p = 0.5 * OCCUPANCY / 6
    expect(exactCourse(plan)[1200]!.filled).toBeCloseTo(p / (p + 0.02 - p * 0.02), 6)
  })
  it('adds up the classes of vesicles: rate = (ρa³/6)·Σ share·mobility·p', () => {
    const vesicles = [{ share: 0.7, attachFactor: 1, mobilityFactor: 0.5, number: null }, { share: 0.3, attachFactor: 0.4, mobilityFactor: 1, number: null }]
    const plan = planOf({ supply: 'stirred', siteCount: 40, vesicles, attachProbability: [[0.8, 0.8 * 0.4]], steps: 4000 })
    const p = OCCUPANCY / 6 * (0.7 * 0.5 * 0.8 + 0.3 * 0.32)
    expect(distance(meanTime(walk(kernel, plan, 'stirred', 'classes', 400), 1 / p), 1)).toBeLessThan(4)
  })
})

describe('detachment on the lattice', () => {
  const d = 0.004, s = 0.2, box = onFloor(3, 2, [9, 8, 5])
  const settled = (wish: PlanWish) => planOf({ ...box, s, detachPerStep: [d], steps: 1500, sampleSteps: Uint32Array.of(0, 1000, 1250, 1500), ...wish })
  const occupancyOf = (plan: WalkPlan) => {
    const blocks = walk(kernel, plan, 'step', 'detachment', 1200)
    return [1, 2, 3].map(sample => ({ value: meanFilled(blocks, sample).value / 6, se: meanFilled(blocks, sample).se / 6 }))
  }
  // W-14: k₊/(k₊ + k₋) (standard); detailed balance holds whatever the depletion on the way. Steps leave d + p of k₋ and k₊.
  it('settles at k₊/(k₊ + k₋) for independent vesicles', () => {
    const attach = s * OCCUPANCY / 6, exact = attach / (attach + d)
    for (const one of occupancyOf(settled({}))) expect(Math.abs(one.value - exact)).toBeLessThan(4 * one.se + d + attach)
  })
  // Detailed balance under exclusion: filled·(1 − ρa³)·d = empty·ρa³·s/6 (derivation).
  it('settles higher under exclusion, as a taken voxel keeps a vesicle at its site', () => {
    const odds = OCCUPANCY * s / 6 / (d * (1 - OCCUPANCY)), exact = odds / (1 + odds)
    for (const one of occupancyOf(settled({ crowding: 'exclusive' }))) expect(Math.abs(one.value - exact)).toBeLessThan(4 * one.se + d + s * OCCUPANCY / 6)
  })
})
