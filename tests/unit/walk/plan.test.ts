/** Compiled plans: steps, samples, rounding, per-step chances. */
import { describe, expect, it } from 'vitest'
import { ScenarioSchema } from '../../../shared/schemas/scenario'
import { boundaryInflow, firstOccupantChance, stirredChance } from '../../../shared/walk/chances'
import { compilePlan } from '../../../shared/walk/plan'
import { CONTROL } from '../../fixtures/control'
import { smallScenario } from './support'

describe('time', () => {
  it('runs in steps of a²/(6D)', () => {
    const plan = compilePlan(ScenarioSchema.parse(CONTROL))
    expect(plan.stepS).toBeCloseTo(0.05 ** 2 / 0.6, 15)
    expect(plan.steps).toBe(14_400)
    expect(plan.occupancy).toBeCloseTo(0.1, 12)
  })
  it('reads samples at the nearest step, each once, from 0 on and never past the end', () => {
    const plan = compilePlan(smallScenario({ schedule: { durationS: 0.25, sampleEveryMs: 20 } }))
    expect([...plan.sampleSteps]).toEqual([0, 5, 10, 14, 19, 24, 29, 34, 38, 43, 48, 53, 58])
    const dense = compilePlan(smallScenario({ schedule: { durationS: 0.25, sampleEveryMs: 1 } }))
    expect([...dense.sampleSteps]).toEqual(Array.from({ length: 61 }, (_, n) => n))
  })
  it('keeps the last sample when rounding would drop it', () => {
    const plan = compilePlan(smallScenario({ schedule: { durationS: 0.3, sampleEveryMs: 100 } }))
    expect(plan.sampleSteps).toHaveLength(4)
    expect(plan.sampleSteps[3]).toBe(plan.steps)
  })
  it('bins first attachments in at most 512 bins that cover all steps', () => {
    for (const durationS of [0.1, 2, 2.14, 60]) {
      const plan = compilePlan(smallScenario({ schedule: { durationS, sampleEveryMs: 50 } }))
      expect(plan.histogramBins).toBeLessThanOrEqual(512)
      expect(plan.histogramBins * plan.histogramBinSteps).toBeGreaterThanOrEqual(plan.steps)
    }
  })
  it('rounds releases to steps and drops those that round to the end', () => {
    const plan = compilePlan(smallScenario({ schedule: { durationS: 0.25, releases: [{ atMs: 21, fraction: 0.5 }, { atMs: 249.9, fraction: 1 }] } }))
    expect(plan.releases).toEqual([{ step: 5, fraction: 0.5 }])
  })
})

describe('counts', () => {
  it('realise shares of sites by largest remainder', () => {
    expect(compilePlan(ScenarioSchema.parse(CONTROL)).sitesPerClass).toEqual([29, 19])
  })
  it('round the number in a sealed terminal to the nearest whole and split it by largest remainder', () => {
    const reservoir = { supply: 'sealed' as const, sizeUm: [0.5, 0.5, 0.25] as [number, number, number] }
    expect(compilePlan(smallScenario({ reservoir })).vesicles.map(one => one.number)).toEqual([100])
    const vesicles = [{ name: 'a', share: 0.333 }, { name: 'b', share: 0.667 }]
    expect(compilePlan(smallScenario({ reservoir, vesicles })).vesicles.map(one => one.number)).toEqual([33, 67])
  })
  it('have no number under a held supply', () => expect(compilePlan(smallScenario()).vesicles[0]!.number).toBeNull())
})

describe('chances', () => {
  const plan = compilePlan(smallScenario({
    sites: [{ name: 'a', share: 0.5, attachProbability: 0.4, detachPerS: 2, readyPerS: 5 }, { name: 'b', share: 0.5, attachProbability: 0.2 }],
    vesicles: [{ name: 'v', share: 0.75, attachFactor: 1, mobilityFactor: 0.5 }, { name: 'w', share: 0.25, attachFactor: 0.5, mobilityFactor: 1 }],
    schedule: { decline: { restFactor: 0.1, timeConstantS: 1.5 } },
  }))
  it('are per hit: site × vesicle class', () => expect(plan.attachProbability).toEqual([[0.4, 0.2], [0.2, 0.1]]))
  it('are per step for rates', () => {
    expect(plan.detachPerStep[0]).toBeCloseTo(1 - Math.exp(-2 * plan.stepS), 14)
    expect(plan.detachPerStep[1]).toBe(0)
    expect(plan.readyPerStep[0]).toBeCloseTo(1 - Math.exp(-5 * plan.stepS), 14)
    expect(plan.readyPerStep[1]).toBeNull()
    expect(plan.decline!.perStep).toBeCloseTo(Math.exp(-plan.stepS / 1.5), 14)
  })
  it('follow the classes of vesicles', () => {
    expect(stirredChance(plan, 0)).toBeCloseTo(plan.occupancy / 6 * (0.75 * 0.5 * 0.4 + 0.25 * 0.2), 14)
    expect(firstOccupantChance(plan)).toBeCloseTo(0.375 / (0.375 + 0.125), 14)
    expect(boundaryInflow(plan)).toEqual({ perFace: plan.occupancy / 6 * 0.625, firstClass: 0.375 / 0.625 })
  })
  it('fall back to shares for occupants where no class ever attaches', () => {
    const still = compilePlan(smallScenario({ vesicles: [{ name: 'v', share: 0.75, mobilityFactor: 0 }, { name: 'w', share: 0.25, attachFactor: 0 }] }))
    expect(firstOccupantChance(still)).toBe(0.75)
  })
})

it('a stirred supply has no lattice', () => {
  const plan = compilePlan(smallScenario({ reservoir: { supply: 'stirred' } }))
  expect([plan.nx, plan.ny, plan.nz, plan.freeVoxels, plan.flags.length]).toEqual([0, 0, 0, 0, 0])
  expect([...plan.voxelOfSite]).toEqual([-1, -1, -1, -1, -1, -1])
})
