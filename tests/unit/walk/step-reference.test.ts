/** The kernel's step-by-step and stirred walks leave the plain walk's blocks, bit for bit, whatever a scenario switches on. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compilePlan } from '../../../shared/walk/plan'
import { seedWords } from '../../../shared/walk/streams'
import { referenceKernel } from '../../../workers/reference/walk'
import { anyScenario, freshKernel, smallScenario } from './support'

const kernel = await freshKernel()

describe.each(['stirred', 'lattice'] as const)('%s walks', (supply) => {
  const algorithm = supply === 'stirred' ? 'stirred' : 'step'
  it('equal the plain walk on arbitrary small scenarios', () => {
    let attachments = 0, filledUp = 0
    fc.assert(fc.property(anyScenario(supply), fc.string({ maxLength: 20 }), fc.integer({ min: 0, max: 5000 }), (scenario, seed, from) => {
      const plan = compilePlan(scenario), [low, high] = seedWords(seed)
      const block = kernel.prepare(plan, algorithm).run(low, high, from, from + 3)
      expect(block).toEqual(referenceKernel.prepare(plan, algorithm).run(low, high, from, from + 3))
      attachments += block.events.flat().reduce((sum, one) => sum + one, 0)
      filledUp += block.exposureSteps.flat().filter(one => one === 0).length
    }), { numRuns: 600, seed: 20_261_201 })
    // Otherwise the scenarios were too dull to show anything.
    expect(attachments).toBeGreaterThan(500)
    expect(filledUp).toBeGreaterThan(0)
  })
})

it('does not depend on earlier calls or on how replicates are cut into calls', async () => {
  const plan = compilePlan(smallScenario()), exclusive = compilePlan(smallScenario({ medium: { crowding: 'exclusive' } }))
  const whole = (await freshKernel()).prepare(plan, 'step').run(1, 2, 0, 20)
  kernel.prepare(exclusive, 'step').run(5, 5, 0, 7)
  const walk = kernel.prepare(plan, 'step')
  const parts = [walk.run(1, 2, 13, 20), walk.run(1, 2, 0, 13)]
  expect(parts[1]!.events[0]!.concat(parts[0]!.events[0]!)).toEqual(whole.events[0])
  expect(parts[1]!.exposureSteps[0]!.concat(parts[0]!.exposureSteps[0]!)).toEqual(whole.exposureSteps[0])
  expect(parts[0]!.filledSum[0]!.map((sum, i) => sum + parts[1]!.filledSum[0]![i]!)).toEqual(whole.filledSum[0])
})

it('keeps walking a plan that was put out of memory by others', () => {
  const plans = Array.from({ length: 7 }, (_, i) => compilePlan(smallScenario({ schedule: { durationS: 0.1 + i / 100 } })))
  const walks = plans.map(plan => kernel.prepare(plan, 'step'))
  const first = walks.map(walk => walk.run(3, 4, 0, 4))
  expect(walks.map(walk => walk.run(3, 4, 0, 4))).toEqual(first)
})

it('refuses an algorithm that is not the law of the plan', () => {
  const independent = compilePlan(smallScenario()), exclusive = compilePlan(smallScenario({ medium: { crowding: 'exclusive' } }))
  const stirred = compilePlan(smallScenario({ reservoir: { supply: 'stirred' } }))
  expect(() => kernel.prepare(independent, 'stirred')).toThrow(RangeError)
  expect(() => kernel.prepare(stirred, 'step')).toThrow(RangeError)
  expect(() => kernel.prepare(exclusive, 'touch')).toThrow(/exclusion is walked by step/)
  expect(() => kernel.prepare(exclusive, 'attempt')).toThrow(/exclusion is walked by step/)
})
