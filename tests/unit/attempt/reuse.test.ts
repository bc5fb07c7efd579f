/** Tables are reused while someone edits, and never change a result: cached, handed over or built anew, the bits are the same. */
import { describe, expect, it } from 'vitest'
import type { WalkPlan } from '../../../shared/walk/types'
import { AttemptEngine } from '../../../workers/attempt'
import { PlacedPlans } from '../../../workers/placing'
import { kernelHost, planOf } from './support'

async function freshEngine(): Promise<AttemptEngine> {
  const host = await kernelHost()
  return new AttemptEngine(host, new PlacedPlans(host))
}
const base = { size: [16, 15, 14] as [number, number, number], plate: [4, 3, 2] as [number, number, 1 | 2], supply: 'sealed' as const, occupancy: 0.12, probabilities: [0.4, 0.05], steps: 1500 }
const runOf = (engine: AttemptEngine, plan: WalkPlan) => engine.prepare(plan).run(5, 6, 0, 60)

describe('the cache', () => {
  const edits: [string, WalkPlan][] = [
    ['density', planOf({ ...base, occupancy: 0.2 })], ['probability below s_max', planOf({ ...base, probabilities: [0.3, 0.1] })],
    ['a longer run', planOf({ ...base, steps: 9000 })], ['diffusion', planOf(base, { stepS: 5e-4 })],
    ['the protocol', planOf(base, { releases: [{ step: 300, fraction: 0.5 }], decline: { restFactor: 0.2, perStep: 0.99 }, initialFill: 0.4, detachPerStep: [0.01, 0], readyPerStep: [0.1, null] })],
    ['layout of classes', planOf({ ...base, layout: 'rows' })],
  ]
  it.each(edits)('serves an edit of %s without building, and gives what a fresh kernel gives', async (_, plan) => {
    const engine = await freshEngine()
    runOf(engine, planOf(base))
    expect(engine.cache.built).toBe(1)
    const block = runOf(engine, plan)
    expect(engine.cache.built).toBe(1)
    expect(block).toEqual(runOf(await freshEngine(), plan))
  })
  it.each([
    ['geometry', planOf({ ...base, size: [16, 15, 15] })], ['s_max', planOf({ ...base, probabilities: [0.6, 0.05] })],
    ['mobility', { ...planOf(base), vesicles: [{ ...planOf(base).vesicles[0]!, mobilityFactor: 0.5 }] }],
    // A run shorter than the waiting law has tables of its own: its bits may not depend on what was walked before.
    ['a much shorter run', planOf({ ...base, steps: 200 })],
  ])('builds for another %s, and gives what a fresh kernel gives', async (_, plan) => {
    const engine = await freshEngine()
    runOf(engine, planOf(base))
    const block = runOf(engine, plan)
    expect(engine.cache.built).toBe(2)
    expect(block).toEqual(runOf(await freshEngine(), plan))
  })
  it('forgets the oldest beyond its bytes and still serves walks prepared before', async () => {
    const engine = await freshEngine(), plan = planOf({ ...base, probabilities: [0.4] }), prepared = engine.prepare(plan), first = prepared.run(1, 2, 0, 20)
    engine.cache.keptBytes = 1_000_000
    for (let n = 20; n < 28; n++) runOf(engine, planOf({ ...base, size: [n, n, n] }))
    expect(engine.cache.bytes).toBeLessThan(1_500_000)
    expect(prepared.run(1, 2, 0, 20)).toEqual(first)
  })
})

describe('a handover', () => {
  const slow = { ...planOf(base), attachProbability: [[0.4, 0.2], [0.05, 0.025]], vesicles: [{ share: 0.5, attachFactor: 1, mobilityFactor: 1, number: 100 }, { share: 0.5, attachFactor: 0.5, mobilityFactor: 0.3, number: 100 }] }
  it.each([['one class', planOf(base)], ['two mobilities', slow]])('of tables (%s) saves the building and keeps the bits', async (_, plan) => {
    const maker = (await freshEngine()).prepare(plan), tables = maker.exportTables()!
    const engine = await freshEngine(), taker = engine.prepare(plan)
    taker.adoptTables(tables)
    const built = engine.cache.built
    expect(taker.run(3, 4, 0, 60)).toEqual(maker.run(3, 4, 0, 60))
    expect(engine.cache.built).toBe(built)
    expect(taker.tableBytes).toBe(maker.tableBytes)
    expect(taker.landingError).toBe(maker.landingError)
    expect(tables.byteLength).toBeGreaterThan(maker.tableBytes)
  })
  it('of something else is refused', async () => {
    const prepared = (await freshEngine()).prepare(planOf(base))
    expect(() => prepared.adoptTables(new ArrayBuffer(4096))).toThrow(RangeError)
  })
})

describe('blocks', () => {
  it('do not depend on how replicates are cut into calls', async () => {
    const prepared = (await freshEngine()).prepare(planOf(base, { initialFill: 0.3, releases: [{ step: 400, fraction: 0.7 }] })), whole = prepared.run(3, 9, 0, 40)
    const parts = [prepared.run(3, 9, 0, 11), prepared.run(3, 9, 11, 12), prepared.run(3, 9, 12, 40)]
    whole.exposureSteps.forEach((row, c) => expect(parts.flatMap(part => part.exposureSteps[c]!)).toEqual(row))
    whole.filledSumSq.forEach((row, c) => expect(row).toEqual(row.map((_, i) => parts.reduce((sum, part) => sum + part.filledSumSq[c]![i]!, 0))))
  })
  it('of sites that nothing can attach to stay empty', async () => {
    const block = runOf(await freshEngine(), planOf({ ...base, probabilities: [0] }))
    expect(block.events[0]!.every(count => count === 0)).toBe(true)
    expect(block.exposureSteps[0]!.every(steps => steps === 24 * 1500)).toBe(true)
  })
})
