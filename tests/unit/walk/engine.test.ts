/** What every engine promises, whatever its algorithm: blocks of whole numbers that add up, streams per replicate, no trace of earlier calls. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compilePlan } from '../../../shared/walk/plan'
import { seedWords } from '../../../shared/walk/streams'
import type { Algorithm, ReplicateBlock, WalkPlan } from '../../../shared/walk/types'
import { referenceKernel } from '../../../workers/reference/walk'
import { anyScenario, freshKernel, smallScenario } from './support'

const wasm = await freshKernel()
const engines: [string, typeof wasm, Algorithm][] = [
  ['reference stirred', referenceKernel, 'stirred'], ['reference step', referenceKernel, 'step'],
  ['kernel stirred', wasm, 'stirred'], ['kernel step', wasm, 'step'], ['kernel touch', wasm, 'touch'], ['kernel attempt', wasm, 'attempt'],
]
const sum = (numbers: number[]) => numbers.reduce((all, one) => all + one, 0)

/** A scenario of every feature that an algorithm admits. */
const admitted = (algorithm: Algorithm) => anyScenario(algorithm === 'stirred' ? 'stirred' : 'lattice').map(scenario =>
  algorithm === 'touch' || algorithm === 'attempt' ? { ...scenario, medium: { ...scenario.medium, crowding: 'independent' as const } } : scenario)

function expectSound(plan: WalkPlan, block: ReplicateBlock) {
  const replicates = block.to - block.from, classes = plan.sitesPerClass.length, samples = plan.sampleSteps.length
  expect(Object.keys(block).sort()).toEqual([
    'events', 'exposureSteps', 'filledSum', 'filledSumSq', 'firstAttachment', 'from', 'to',
    ...(plan.decline ? ['declinedExposure'] : []), ...(plan.readyPerStep.some(one => one !== null) ? ['readySum', 'readySumSq'] : []), ...(classes === 2 ? ['totalSumSq'] : []),
  ].sort())
  expect([block.events, block.exposureSteps].map(rows => rows.map(row => row.length))).toEqual(Array(2).fill(Array(classes).fill(replicates)))
  expect([block.filledSum, block.filledSumSq].map(rows => rows.map(row => row.length))).toEqual(Array(2).fill(Array(classes).fill(samples)))
  expect(block.firstAttachment).toHaveLength(plan.histogramBins)
  const all = [block.filledSum, block.filledSumSq, block.events, block.exposureSteps, block.declinedExposure ?? [], block.readySum ?? [], [block.firstAttachment]].flat(2)
  expect(all.every(one => Number.isSafeInteger(one) && one >= 0)).toBe(true)
  plan.sitesPerClass.forEach((sites, siteClass) => {
    block.filledSum[siteClass]!.forEach((filled, i) => {
      expect(filled).toBeLessThanOrEqual(sites * replicates)
      expect(block.filledSumSq[siteClass]![i]! * replicates).toBeGreaterThanOrEqual(filled * filled)
      if (block.readySum) expect(block.readySum[siteClass]![i]!).toBeLessThanOrEqual(filled)
    })
    block.exposureSteps[siteClass]!.forEach((steps, k) => {
      expect(steps).toBeLessThanOrEqual(sites * plan.steps)
      // An attachment takes at least the step that it falls in.
      expect(block.events[siteClass]![k]!).toBeLessThanOrEqual(steps)
      if (block.declinedExposure) expect(block.declinedExposure[siteClass]![k]!).toBeLessThanOrEqual(steps * 65536)
    })
  })
  expect(sum(block.firstAttachment)).toBeLessThanOrEqual(Math.min(sum(block.events.flat()), plan.siteCount * replicates))
}

describe.each(engines)('%s', (_, kernel, algorithm) => {
  it('leaves sound blocks for arbitrary scenarios', () => {
    fc.assert(fc.property(admitted(algorithm), fc.integer({ min: 0, max: 100 }), (scenario, from) => {
      const plan = compilePlan(scenario)
      expectSound(plan, kernel.prepare(plan, algorithm).run(11, 12, from, from + 4))
    }), { numRuns: 60, seed: 6 })
  })

  const supply = algorithm === 'stirred' ? { supply: 'stirred' as const } : { supply: 'held' as const, marginSites: 4 }
  const plan = compilePlan(smallScenario({ reservoir: supply, schedule: { durationS: 1, sampleEveryMs: 10 }, sites: [{ name: 'a', share: 0.5, attachProbability: 0.6 }, { name: 'b', share: 0.5, attachProbability: 0.2 }] }))
  const run = (from: number, to: number, seed = 'contract') => kernel.prepare(plan, algorithm).run(...seedWords(seed), from, to)

  it('accounts for every site: filled at the end = attachments, all of them first ones, where none is lost', () => {
    const block = run(0, 40)
    expect(sum(block.firstAttachment)).toBe(sum(block.events.flat()))
    plan.sitesPerClass.forEach((_sites, siteClass) => expect(block.filledSum[siteClass]!.at(-1)).toBe(sum(block.events[siteClass]!)))
    expect(block.filledSum.every(row => row.every((filled, i) => i === 0 ? filled === 0 : filled >= row[i - 1]!))).toBe(true)
  })
  it('counts exposure as the empty sites of every step', () => {
    const everyStep: WalkPlan = { ...plan, steps: 60, sampleSteps: Uint32Array.from({ length: 61 }, (_one, n) => n), histogramBinSteps: 1, histogramBins: 60 }
    const block = kernel.prepare(everyStep, algorithm).run(1, 2, 0, 25)
    plan.sitesPerClass.forEach((sites, siteClass) => {
      const empty = block.filledSum[siteClass]!.slice(0, 60).map(filled => 25 * sites - filled)
      expect(sum(block.exposureSteps[siteClass]!)).toBe(sum(empty))
    })
    // And bins first attachments by their step: what is filled at n has attached in steps 1 … n.
    const filled = block.filledSum[0]!.map((one, i) => one + block.filledSum[1]![i]!)
    filled.forEach((one, n) => expect(sum(block.firstAttachment.slice(0, n))).toBe(one))
  })
  it('gives a replicate its own stream, whichever call it falls in', () => {
    const whole = run(0, 30), head = run(0, 7), tail = run(7, 30)
    expect(head.exposureSteps.map((row, i) => [...row, ...tail.exposureSteps[i]!])).toEqual(whole.exposureSteps)
    expect(head.firstAttachment.map((one, i) => one + tail.firstAttachment[i]!)).toEqual(whole.firstAttachment)
    expect(new Set(whole.exposureSteps[1]).size).toBeGreaterThan(10)
  })
  it('follows the seed', () => {
    expect(run(0, 20)).toEqual(run(0, 20))
    expect(run(0, 20, 'another')).not.toEqual(run(0, 20))
  })
  it('attaches nothing where the probability is 0', () => {
    const barren: WalkPlan = { ...plan, attachProbability: [[0], [0]] }
    const block = kernel.prepare(barren, algorithm).run(1, 2, 0, 5)
    expect(sum(block.events.flat())).toBe(0)
    expect(sum(block.exposureSteps.flat())).toBe(5 * 6 * plan.steps)
  })
})
