/** What to expect against seeded plain walks: the closed form's curve on stirred supply with every effect at once, and the isolated site's exact curve with two mobilities and decline. */
import { describe, expect, it } from 'vitest'
import { closedFormFilled } from '../../shared/kinetics/closed-form'
import { exactIsolatedFilled } from '../../shared/kinetics/isolated'
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../../shared/schemas/scenario'
import { compilePlan } from '../../shared/walk/plan'
import { seedWords } from '../../shared/walk/streams'
import { walkReference } from '../../workers/reference/walk'
import { expectWithin4Se } from './support'

const scenarioOf = (differs: Omit<ScenarioInput, 'format' | 'version' | 'title' | 'medium'>): Scenario => ScenarioSchema.parse({
  format: 'moorage-scenario', version: 1, title: 'Check',
  medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' }, ...differs,
})

describe('closed form with every effect at once', () => {
  const scenario = scenarioOf({
    ribbon: { shape: 'plate', rows: 5, columns: 10, faces: 2, classLayout: 'interleaved' }, reservoir: { supply: 'stirred' },
    sites: [{ name: 'quick', share: 0.6, attachProbability: 0.3, detachPerS: 0.2, readyPerS: 3 }, { name: 'reluctant', share: 0.4, attachProbability: 0.05, readyPerS: 1 }],
    vesicles: [{ name: 'able', share: 0.7 }, { name: 'slow', share: 0.3, mobilityFactor: 0.5, attachFactor: 0.4 }],
    schedule: { durationS: 4, sampleEveryMs: 250, initialFill: 0.15, releases: [{ atMs: 1501, fraction: 0.6 }], decline: { restFactor: 0.3, timeConstantS: 0.8 } },
  })
  it('is the mean of stirred walks at every sample, filled and ready, per kind of site', () => {
    const plan = compilePlan(scenario), replicates = 400
    const block = walkReference(plan, ...seedWords('every effect'), 0, replicates)
    const expected = closedFormFilled(scenario, Array.from(plan.sampleSteps, n => n * plan.stepS))
    for (const [sums, squares, curve] of [[block.filledSum, block.filledSumSq, expected.filled], [block.readySum!, block.readySumSq!, expected.ready!]] as const)
      sums.forEach((row, j) => row.forEach((sum, k) => {
        const mean = sum / replicates, se = Math.sqrt((squares[j]![k]! / replicates - mean * mean) / replicates)
        // A step is 1/240 s; at rates of order 1/s continuous time differs by about half a step's worth.
        const discrete = plan.sitesPerClass[j]! * plan.stepS / 2
        expectWithin4Se(mean, curve[j]![k]!, se + discrete / 4)
      }))
  })
})

describe('isolated site with two mobilities under decline', () => {
  const scenario = scenarioOf({
    ribbon: { shape: 'isolated' }, reservoir: { supply: 'held', marginSites: 4 },
    sites: [{ name: 'site', share: 1, attachProbability: 1, readyPerS: 6 }],
    vesicles: [{ name: 'quick', share: 0.5, attachFactor: 0.8 }, { name: 'slow', share: 0.5, mobilityFactor: 0.2 }],
    schedule: { durationS: 1.5, sampleEveryMs: 100, initialFill: 0.2, decline: { restFactor: 0.4, timeConstantS: 0.3 } },
  })
  it('fills as the linear solution says', () => {
    const plan = compilePlan(scenario), replicates = 5000
    const block = walkReference(plan, ...seedWords('two mobilities'), 0, replicates)
    const exact = exactIsolatedFilled(scenario, plan)!
    for (const [sums, curve] of [[block.filledSum[0]!, exact.filled], [block.readySum![0]!, exact.ready!]] as const)
      sums.forEach((sum, k) => expectWithin4Se(sum / replicates, curve[k]!, Math.sqrt(curve[k]! * (1 - curve[k]!) / replicates)))
    const exposure = block.exposureSteps[0]!.reduce((all, one) => all + one, 0), events = block.events[0]!.reduce((all, one) => all + one, 0)
    expect(Math.abs(exposure * plan.stepS / events / exact.tauS! - 1)).toBeLessThan(4 / Math.sqrt(events))
  })
})
