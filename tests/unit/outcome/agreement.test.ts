/** Verdict, reason, and the test of exact equality: its size and its power against the real kernel. */
import { describe, expect, it } from 'vitest'
import { exactLawTest, reasonOf, replicatesToDecide, verdictOf } from '../../../shared/walk/agreement'
import { frameOf } from '../../../shared/walk/frame'
import { mergeAll } from '../../../shared/walk/merge'
import { compilePlan } from '../../../shared/walk/plan'
import { talliesOf } from '../../../shared/walk/tallies'
import { smallScenario, walkBlocks, walkOutcome } from './walked'

describe('verdictOf', () => {
  it.each([
    [{ value: 1, low: 0.96, high: 1.04 }, 'agrees'], [{ value: 1.2, low: 1.06, high: 1.3 }, 'slower'], [{ value: 0.9, low: 0.8, high: 0.94 }, 'faster'],
    [{ value: 1.029, low: 1.007, high: 1.0501 }, 'undecided'], [{ value: 1, low: 0.9, high: 1.1 }, 'undecided'], [{ value: 0.97, low: 0.949, high: 0.99 }, 'undecided'],
    [{ value: 2, low: 1.5, high: null }, 'slower'], [{ value: 2, low: 0.99, high: null }, 'undecided'], [{ value: 1, low: null, high: null }, 'undecided'],
  ] as const)('%o: %s', (ratio, verdict) => expect(verdictOf(ratio)).toBe(verdict))
  it('goes by the stated margin', () => {
    expect(verdictOf({ value: 1.1, low: 1.06, high: 1.14 }, 15)).toBe('agrees')
    expect(verdictOf({ value: 1.03, low: 1.02, high: 1.04 }, 1)).toBe('slower')
  })
})

describe('replicatesToDecide', () => {
  it('asks for more than there are, and for more the nearer the edge', () => {
    expect(replicatesToDecide({ value: 1.029, low: 1.007, high: 1.051 }, 200)).toBe(450)
    expect(replicatesToDecide({ value: 1.045, low: 1.023, high: 1.067 }, 200)!).toBeGreaterThan(4000)
    expect(replicatesToDecide({ value: 1.05, low: 1.028, high: 1.072 }, 200)!).toBeLessThan(1e6)
    expect(replicatesToDecide({ value: 1, low: null, high: null }, 1)).toBeNull()
  })
  it('walking so many decides in about four of five runs', () => {
    const scenario = smallScenario()
    let decided = 0
    for (let seed = 0; seed < 40; seed++) {
      const few = walkOutcome(scenario, 'stirred', `few ${seed}`, 50)
      const more = few.agreement.replicatesToDecide ?? 50
      if (walkOutcome(scenario, 'stirred', `more ${seed}`, Math.min(1000, more)).agreement.verdict !== 'undecided') decided++
    }
    expect(decided).toBeGreaterThanOrEqual(24)
  })
})

describe('reasonOf', () => {
  const run = { replicates: 200, seen: 5000, netAttached: 20 }
  const held = frameOf(smallScenario({ reservoir: { supply: 'held', marginSites: 6 } }))
  const sealed = (um: number) => frameOf(smallScenario({ reservoir: { supply: 'sealed', sizeUm: [um, um, um] } }))
  it.each([
    [held, 'slower', run, 'own-neighbourhood'], [sealed(2), 'slower', run, 'own-neighbourhood'], [sealed(0.5), 'slower', run, 'finite-pool'],
    [frameOf(smallScenario()), 'slower', run, 'none'], [frameOf(smallScenario()), 'agrees', run, 'none'], [held, 'agrees', run, 'none'], [held, 'faster', run, 'none'],
    [held, 'undecided', run, 'none'], [held, 'undecided', { ...run, replicates: 1 }, 'too-few'], [held, 'undecided', { ...run, seen: 3 }, 'too-few'],
  ] as const)('case %#', (frame, verdict, facts, reason) => expect(reasonOf(frame, verdict, facts)).toBe(reason))

  it('exclusion explains faster and never slower', () => {
    const exclusive = frameOf(smallScenario({ reservoir: { supply: 'held', marginSites: 6 }, medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'exclusive' } }))
    expect(reasonOf(exclusive, 'faster', run)).toBe('exclusion')
    expect(reasonOf(exclusive, 'slower', run)).toBe('own-neighbourhood')
  })
  it('counts the able vesicles when few can attach', () => {
    const able = frameOf(smallScenario({ reservoir: { supply: 'sealed', sizeUm: [1, 1, 1] }, vesicles: [{ name: 'able', share: 0.05 }, { name: 'unable', share: 0.95, attachFactor: 0 }] }))
    expect(reasonOf(able, 'slower', run)).toBe('finite-pool')
    expect(reasonOf(frameOf(smallScenario({ reservoir: { supply: 'sealed', sizeUm: [1, 1, 1] } })), 'slower', run)).toBe('own-neighbourhood')
  })
  it('names the step where the curve of a stirred supply runs ahead of its exponential', () => {
    const coarse = frameOf(smallScenario({ medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 7000, crowding: 'independent' } }))
    expect(reasonOf(coarse, 'agrees', run)).toBe('discrete-step')
  })
})

describe('test of exact equality', () => {
  const pOf = (scenario: ReturnType<typeof smallScenario>, seed: string, replicates: number, plan = compilePlan(scenario)) =>
    exactLawTest(talliesOf(frameOf(scenario), mergeAll(walkBlocks(scenario, 'stirred', seed, replicates, plan))))

  it('on a stirred supply it rejects at its nominal 5 %: between 2 % and 9 % of 200 seeds', () => {
    const scenario = smallScenario()
    const statistics = Array.from({ length: 200 }, (_, seed) => pOf(scenario, `size ${seed}`, 50))
    const rejected = statistics.filter(one => one.pValue! < 0.05).length / 200
    expect(rejected).toBeGreaterThanOrEqual(0.02)
    expect(rejected).toBeLessThanOrEqual(0.09)
    // Mean and spread of a standard normal statistic, 4 standard errors.
    const mean = statistics.reduce((sum, one) => sum + one.statistic!, 0) / 200
    expect(Math.abs(mean)).toBeLessThan(4 / Math.sqrt(200))
    const square = statistics.reduce((sum, one) => sum + one.statistic! ** 2, 0) / 200
    expect(Math.abs(square - 1)).toBeLessThan(4 * Math.sqrt(2 / 200))
  })

  it('catches an attachment probability that is 5 % off in at least 99 of 100 seeds', () => {
    const scenario = smallScenario({
      ribbon: { shape: 'plate', rows: 6, columns: 8, faces: 2, classLayout: 'interleaved' },
      sites: [{ name: 'site', share: 1, attachProbability: 0.3 }], schedule: { durationS: 0.2, sampleEveryMs: 100 },
    })
    const plan = compilePlan(scenario)
    const off = { ...plan, attachProbability: plan.attachProbability.map(row => row.map(p => p * 0.95)) }
    let caught = 0
    for (let seed = 0; seed < 100; seed++) if (pOf(scenario, `off ${seed}`, 1000, off).pValue! < 0.05) caught++
    expect(caught).toBeGreaterThanOrEqual(99)
    expect(pOf(scenario, 'honest', 1000).pValue!).toBeGreaterThan(0.001)
  })

  it('holds its size under decline and with two kinds of site and vesicle', () => {
    const scenario = smallScenario({
      sites: [{ name: 'a', share: 0.5, attachProbability: 1 }, { name: 'b', share: 0.5, attachProbability: 0.1, detachPerS: 2 }],
      vesicles: [{ name: 'able', share: 0.3 }, { name: 'slow', share: 0.7, attachFactor: 0.5, mobilityFactor: 0.4 }],
      schedule: { durationS: 1.5, sampleEveryMs: 100, initialFill: 0.3, releases: [{ atMs: 700, fraction: 0.8 }], decline: { restFactor: 0.1, timeConstantS: 0.3 } },
    })
    const rejected = Array.from({ length: 200 }, (_, seed) => pOf(scenario, `mixed ${seed}`, 50)).filter(one => one.pValue! < 0.05).length / 200
    expect(rejected).toBeGreaterThanOrEqual(0.02)
    expect(rejected).toBeLessThanOrEqual(0.09)
  })
})

it('95 % intervals of the ratio hold 1 on a stirred supply in 90 to 99 % of 200 seeds, few replicates included', () => {
  const scenario = smallScenario()
  for (const replicates of [6, 50]) {
    let held = 0
    for (let seed = 0; seed < 200; seed++) {
      const { low, high } = walkOutcome(scenario, 'stirred', `cover ${seed}`, replicates).ratio
      if (low! <= 1 && high! >= 1) held++
    }
    expect(held / 200).toBeGreaterThanOrEqual(0.9)
    expect(held / 200).toBeLessThanOrEqual(0.99)
  }
})
