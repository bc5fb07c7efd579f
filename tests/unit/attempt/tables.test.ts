/** The attempt sampler's tables: against full lattice solves, between instances of the kernel, and within the sizes that were announced. */
import { describe, expect, it } from 'vitest'
import { ATTEMPT_TABLE_LIMIT, attemptApplies, attemptCeiling, attemptTableBytes, estimateWaitSteps, landingBins } from '../../../shared/walk/attempt-size'
import { mirrorAxes, ribbonBoxOf } from '../../../workers/attempt-boxes'
import { startsOf } from '../../../workers/attempt-starts'
import { buildTables } from '../../../workers/attempt-tables'
import { kernelHost, landingLaw, planOf, representatives, rowLaw, totalVariation, waitLaw, type BoxSpec } from './support'

const host = await kernelHost()
const spec = (size: BoxSpec['size'], plate: BoxSpec['plate'], supply: BoxSpec['supply'], s: number, steps = 14_400): BoxSpec =>
  ({ size, plate, supply, occupancy: 0.1, probabilities: [s], steps })

describe('laws', () => {
  // What is not exact: where a vesicle lands within a bin of waiting times, and when it comes from outside the near box. Bound per jump: 3e-3.
  it.each([
    ['96 sites, held', spec([30, 32, 25], [6, 8, 2], 'held', 0.5), 1, 900], ['96 sites, held', spec([30, 32, 25], [6, 8, 2], 'held', 1), 1, 900],
    ['54 sites on a wall, held', spec([30, 33, 13], [6, 9, 1], 'held', 1), 1, 900], ['96 sites, sealed', spec([40, 40, 40], [6, 8, 2], 'sealed', 0.5), 1, 1200],
    ['96 sites, small and sealed', spec([28, 28, 28], [6, 8, 2], 'sealed', 1), 1, 1600], ['54 sites on a wall, sealed', spec([44, 44, 44], [6, 9, 1], 'sealed', 1), 1, 1000],
    ['24 sites, sealed', spec([16, 16, 16], [4, 3, 2], 'sealed', 1), 1, 1500], ['48 sites of slow vesicles', spec([28, 30, 25], [4, 6, 2], 'held', 0.5), 0.3, 1500],
    ['half a voxel off the middle', spec([21, 20, 20], [4, 3, 2], 'sealed', 0.5), 1, 1500], ['225 sites on a wall', spec([39, 39, 13], [15, 15, 1], 'held', 0.5), 1, 600],
  ] as const)('%s: landings within 3e-3 per jump of full solves, waits within 1e-5', (_, box, mobility, steps) => {
    const plan = planOf(box), set = buildTables(host, plan, box.probabilities[0]!, mobility)
    for (const kind of [0, set.classes - 1]) {
      const { landing, waiting } = totalVariation(host, plan, set, kind, steps, mobility)
      expect(landing).toBeLessThan(3e-3)
      expect(landing).toBeLessThan(1.3 * set.landingError)
      expect(waiting).toBeLessThan(1e-5)
    }
    expect(set.landingError).toBeLessThan(5e-3)
    host.release(set.pointer)
  })

  it('that are whole: every row sums to 1, and every wait that can come has somewhere to land', () => {
    const set = buildTables(host, planOf(spec([16, 17, 18], [4, 3, 2], 'sealed', 1)), 1, 1)
    representatives(host, set).forEach((_, kind) => {
      const waits = waitLaw(host, set, kind)
      expect(waits.reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 12)
      for (let wait = 1; wait <= set.waitSteps; wait++)
        if (waits[wait - 1]! > 1e-7) expect(landingLaw(host, set, kind, wait).reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 12)
    })
    expect([...rowLaw(Uint32Array.of(0x8000_0001, 0xFFFF_0001))]).toEqual([0.25, expect.closeTo(0.75, 12)])
  })

  it('that lose nothing in a sealed terminal: a vesicle always comes back', () => {
    const set = buildTables(host, planOf(spec([12, 13, 11], [3, 3, 2], 'sealed', 0.25, 50_000)), 0.25, 1)
    representatives(host, set).forEach((_, kind) => expect(waitLaw(host, set, kind)[set.waitSteps + 2]).toBeLessThan(1e-5))
  })
})

describe('classes of starts', () => {
  it.each([
    [spec([30, 32, 25], [6, 8, 2], 'held', 1), 7, 12], [spec([40, 40, 40], [6, 8, 2], 'sealed', 1), 3, 24], [spec([30, 33, 13], [6, 9, 1], 'held', 1), 3, 15],
    [spec([21, 20, 20], [4, 3, 2], 'sealed', 1), 0, 24], [spec([21, 21, 11], [1, 1, 1], 'held', 1), 3, 1],
  ] as const)('are those of the mirror planes', (box, axes, classes) => {
    const ribbon = ribbonBoxOf(planOf(box)), starts = startsOf(ribbon)
    expect(mirrorAxes(ribbon)).toBe(axes)
    expect(starts.count).toBe(classes)
    starts.classOf.forEach((kind, site) => expect(starts.mirrors[starts.mirrorOf[site]! * ribbon.fronts.length + starts.representatives[kind]!]).toBe(site))
    expect(starts.memberCounts.reduce((sum, count) => sum + count, 0)).toBe(ribbon.fronts.length)
  })
  it('refuse a box whose face is partly open', () => {
    const plan = planOf(spec([9, 9, 6], [2, 2, 1], 'held', 1)), flags = plan.flags.slice()
    flags[11 * 11 * 7 + 11 * 5 + 5] = 1
    expect(() => ribbonBoxOf({ ...plan, flags })).toThrow(RangeError)
  })
})

describe('sizes', () => {
  it.each([
    spec([30, 32, 25], [6, 8, 2], 'held', 1), spec([40, 40, 40], [6, 8, 2], 'sealed', 1, 100_000), spec([44, 44, 44], [6, 9, 1], 'sealed', 0.01, 100_000), spec([60, 30, 20], [6, 8, 2], 'sealed', 1, 100_000),
    spec([21, 21, 11], [1, 1, 1], 'held', 1), spec([44, 44, 13], [20, 20, 1], 'held', 0.5), spec([10, 12, 5], [2, 4, 1], 'held', 1), spec([16, 16, 16], [4, 3, 2], 'sealed', 1, 300),
  ])('stay within what was announced', (box) => {
    const plan = planOf(box), set = buildTables(host, plan, attemptCeiling(plan, 1), 1)
    expect(set.waitSteps).toBeLessThanOrEqual(estimateWaitSteps(plan, 1))
    expect(set.bytes).toBeLessThanOrEqual(attemptTableBytes(plan))
    expect(set.bytes).toBeGreaterThan(attemptTableBytes(plan) / 6)
    expect(set.bytes).toBeLessThan(ATTEMPT_TABLE_LIMIT)
    host.release(set.pointer)
  })
  it('rule the sampler out where they are too large, or where it does not apply', () => {
    expect(attemptApplies(planOf(spec([64, 64, 13], [40, 25, 1], 'held', 1)))).toBe(false)
    expect(attemptApplies(planOf(spec([66, 66, 13], [41, 25, 1], 'held', 1)))).toBe(false)
    expect(attemptApplies({ ...planOf(spec([10, 12, 5], [2, 4, 1], 'held', 1)), crowding: 'exclusive' })).toBe(false)
    // A slow class in a long terminal: its waiting law would need more steps than a row holds.
    const long = planOf(spec([20, 20, 100], [5, 4, 1], 'sealed', 1, 200_000))
    expect(attemptApplies(long)).toBe(true)
    expect(attemptApplies({ ...long, vesicles: [{ ...long.vesicles[0]!, mobilityFactor: 0.1 }] })).toBe(false)
  })
  it('have bins one step wide at first', () => {
    const bins = landingBins(256)
    expect(bins.slice(0, 9)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9])
    expect(bins.at(-1)).toBe(256)
    bins.forEach((end, i) => i > 0 && expect(end).toBeGreaterThan(bins[i - 1]!))
  })
  it.each([[1, 1], [0.51, 1], [0.5, 0.5], [0.3, 0.5], [0.25, 0.25], [0.0125, 1 / 64], [0, 0]])('round s = %s up to %s', (s, ceiling) => {
    expect(attemptCeiling(planOf(spec([10, 12, 5], [2, 4, 1], 'held', s)), 1)).toBe(ceiling)
  })
})
