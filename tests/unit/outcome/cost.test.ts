/** Cost and routing: judged without building anything, by the samplers' own rules; every refusal comes with a suggestion that passes. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../../../shared/schemas/scenario'
import { attemptTableBytes } from '../../../shared/walk/attempt-size'
import { estimateCost, previewRefusal } from '../../../shared/walk/cost'
import { compilePlan } from '../../../shared/walk/plan'
import { routeAlgorithm } from '../../../shared/walk/route'
import { latticeSize } from '../../../shared/walk/table-size'
import { CONTROL } from '../../fixtures/control'
import { kernel, smallScenario, walkBlocks } from './walked'

const bent = (bend: Partial<ScenarioInput>): Scenario => ScenarioSchema.parse({ ...CONTROL, ...bend })
const sealed = (um: number): Partial<ScenarioInput> => ({ reservoir: { supply: 'sealed', sizeUm: [um, um, um] } })
const exclusive: Partial<ScenarioInput> = { medium: { ...CONTROL.medium, crowding: 'exclusive' } }
const plate = (rows: number, columns: number): Partial<ScenarioInput> => ({ ribbon: { shape: 'plate', rows, columns, faces: 1, classLayout: 'rows' } })

describe('routeAlgorithm', () => {
  it.each([
    ['held', bent({}), 'auto', 'attempt'], ['held, step asked', bent({}), 'step', 'step'], ['held, touch asked', bent({}), 'touch', 'touch'],
    ['stirred, whatever is asked', bent({ reservoir: { supply: 'stirred' } }), 'step', 'stirred'],
    ['exclusive', bent(exclusive), 'auto', 'step'], ['exclusive, attempt asked', bent(exclusive), 'attempt', null],
    ['1,200 sites for 1 s', bent({ ...plate(30, 40), schedule: { durationS: 1, sampleEveryMs: 20 } }), 'auto', 'touch'],
    ['1,200 sites for 1 s, attempt asked', bent({ ...plate(30, 40), schedule: { durationS: 1, sampleEveryMs: 20 } }), 'attempt', null],
    ['4,000 sites for 60 s', bent(plate(50, 80)), 'auto', 'step'], ['4,000 sites for 60 s, touch asked', bent(plate(50, 80)), 'touch', null],
  ] as const)('%s', (_what, scenario, asked, algorithm) => {
    const route = routeAlgorithm(scenario, asked)
    expect(route.algorithm).toBe(algorithm)
    expect(route.refusal === null).toBe(algorithm !== null)
  })

  it('whatever is routed can be prepared by the kernel', () => {
    for (const scenario of [bent({}), bent(sealed(1)), bent(exclusive), bent({ reservoir: { supply: 'stirred' } }), bent({ ...plate(20, 40), schedule: { durationS: 0.5, sampleEveryMs: 20 } })]) {
      const { algorithm } = routeAlgorithm(scenario)
      expect(() => kernel.prepare(compilePlan(scenario), algorithm!)).not.toThrow()
    }
  })
})

it('sizes judged from the scenario are those of its compiled plan', () => {
  const scenarios = fc.record({
    rows: fc.integer({ min: 1, max: 7 }), columns: fc.integer({ min: 1, max: 7 }), faces: fc.constantFrom(1 as const, 2 as const), margin: fc.integer({ min: 4, max: 9 }),
    nm: fc.integer({ min: 380, max: 700 }), isSealed: fc.boolean(), mobility: fc.constantFrom(0, 0.3, 1), s: fc.constantFrom(0.01, 0.3, 1),
  }).map(({ rows, columns, faces, margin, nm, isSealed, mobility, s }) => bent({
    ribbon: { shape: 'plate', rows, columns, faces, classLayout: 'rows' },
    reservoir: isSealed ? { supply: 'sealed', sizeUm: [nm / 1000, nm / 1000 + 0.05, nm / 1000] } : { supply: 'held', marginSites: margin },
    sites: [{ name: 'site', share: 1, attachProbability: s }], vesicles: [{ name: 'a', share: 0.5 }, { name: 'b', share: 0.5, mobilityFactor: mobility }],
    schedule: { durationS: 5, sampleEveryMs: 100 },
  }))
  fc.assert(fc.property(scenarios, (scenario) => {
    const size = latticeSize(scenario), plan = compilePlan(scenario)
    expect(size).toMatchObject({ sites: plan.siteCount, steps: plan.steps, voxels: plan.nx * plan.ny * plan.nz, freeVoxels: plan.freeVoxels, attemptBytes: attemptTableBytes(plan) })
    expect(size.latticeBytes).toBeGreaterThan(plan.flags.byteLength + plan.siteBehind.byteLength)
  }), { numRuns: 60 })
})

describe('estimateCost', () => {
  it('costs nothing to ask, however large the terminal', () => {
    const started = performance.now()
    const cost = estimateCost(bent(sealed(100)), 1_000_000)
    expect(performance.now() - started).toBeLessThan(500)
    expect(cost.voxels).toBe(2000 ** 3)
    expect(cost.refusals.map(refusal => refusal.path)).toEqual(['schedule.durationS', 'reservoir.sizeUm'])
    for (const { message, suggestion } of cost.refusals) {
      expect(message).toMatch(/at most/)
      expect(suggestion).not.toBe('')
    }
  })

  it('a suggested duration and a suggested terminal pass', () => {
    const [tooLong] = estimateCost(bent({ ...sealed(8), schedule: { durationS: 600, sampleEveryMs: 100 } }), 10).refusals
    const seconds = Number(/At most ([\d.]+) s/.exec(tooLong!.suggestion)![1])
    expect(estimateCost(bent({ ...sealed(8), schedule: { durationS: seconds, sampleEveryMs: 100 } }), 10).refusals).toEqual([])
    const [tooLarge] = estimateCost(bent({ ...sealed(40), schedule: { durationS: 0.2, sampleEveryMs: 20 } }), 10).refusals
    const micrometres = Number(/example ([\d.]+) ×/.exec(tooLarge!.suggestion)![1])
    expect(estimateCost(bent({ ...sealed(micrometres), schedule: { durationS: 0.2, sampleEveryMs: 20 } }), 10).refusals).toEqual([])
  })

  it.each([[0], [1.5], [1_000_001], [NaN], [-3]])('%d replicates are refused', (replicates) => {
    expect(estimateCost(bent({}), replicates).refusals[0]).toMatchObject({ path: 'replicates' })
  })

  it('says what cannot be saved: more than 50,000 replicates, more than 8 MB; the size is met within a third', () => {
    expect(estimateCost(bent({}), 50_000).unsavable).toMatch(/8 MB/)
    expect(estimateCost(bent({ schedule: { durationS: 60, sampleEveryMs: 2000 } }), 50_001).unsavable).toMatch(/50,000/)
    expect(estimateCost(bent({}), 200).unsavable).toBeNull()
    for (const scenario of [smallScenario(), bent({ reservoir: { supply: 'stirred' }, schedule: { durationS: 20, sampleEveryMs: 50, decline: { restFactor: 0.5, timeConstantS: 1 } } })]) {
      const bytes = JSON.stringify(walkBlocks(scenario, 'stirred', 'bytes', 120)).length, estimate = estimateCost(scenario, 120).savedBytes
      expect(estimate).toBeGreaterThan(bytes / 1.34)
      expect(estimate).toBeLessThan(bytes * 1.5)
    }
  })

  it('seconds grow with the replicates and with the measured pace', () => {
    const [few, many, slow] = [estimateCost(bent({}), 100), estimateCost(bent({}), 1000), estimateCost(bent({}), 1000, 'auto', 3)]
    expect(many.seconds - many.setupSeconds).toBeCloseTo(10 * (few.seconds - few.setupSeconds), 10)
    expect(slow.seconds).toBeCloseTo(3 * many.seconds, 10)
  })
})

describe('previewRefusal', () => {
  it.each([
    ['the control terminal', bent({}), 10, null], ['stirred', bent({ reservoir: { supply: 'stirred' } }), 60, null], ['1,200 sites', bent(plate(30, 40)), 10, /1,000 sites/],
    ['a long exclusive walk', bent(exclusive), 2, /step-by-step/], ['a terminal of 32 MB', bent({ ...sealed(6), schedule: { durationS: 1, sampleEveryMs: 20 } }), 60, /32 MB/],
  ] as const)('%s', (_what, scenario, seconds, reason) => {
    const refusal = previewRefusal(scenario, seconds)
    if (reason === null) expect(refusal).toBeNull()
    else expect(refusal).toMatch(reason)
  })
})
