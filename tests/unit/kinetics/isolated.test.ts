/** The isolated site's linear solution against itself without shortcuts, and against the full box without folding. */
import { describe, expect, it } from 'vitest'
import { exactIsolatedFilled, notExactBecause } from '../../../shared/kinetics/isolated'
import { cumulativeFlux } from '../../../shared/kinetics/isolated-flux'
import { linearLattice } from '../../../shared/kinetics/linear-lattice'
import type { Scenario } from '../../../shared/schemas/scenario'
import { compilePlan } from '../../../shared/walk/plan'
import { scenarioWith, type Bend } from './support'

const isolated = (bend: Bend = {}): Scenario => scenarioWith({
  ribbon: { shape: 'isolated' }, reservoir: { supply: 'held', marginSites: 6 },
  sites: [{ name: 'only', share: 1, attachProbability: 0.3 }], schedule: { durationS: 8, sampleEveryMs: 50 }, ...bend,
})

/** The same law by brute force on the padded box: no folding, no continuation. */
function bruteForce(scenario: Scenario): number[] {
  const plan = compilePlan(scenario)
  const { nx, ny, nz, flags } = plan, px = nx + 2, layer = px * (ny + 2), site = plan.voxelOfSite[0]!
  const hops = [1, -1, px, -px, layer, -layer]
  const logs = new Float64Array(plan.steps + 1)
  for (const [i, vesicle] of plan.vesicles.entries()) {
    let from = Float64Array.from(flags, flag => flag === 0 ? 1 : 0), within = 0
    for (let n = 0; n < plan.steps; n++) {
      const g = plan.decline ? plan.decline.restFactor + (1 - plan.decline.restFactor) * plan.decline.perStep ** n : 1
      const taken = vesicle.mobilityFactor * plan.attachProbability[0]![i]! * g * from[site]! / 6
      const to = new Float64Array(flags.length)
      for (let z = 1; z <= nz; z++) for (let y = 1; y <= ny; y++) for (let x = 1; x <= nx; x++) {
        const p = z * layer + y * px + x
        if (flags[p] !== 0) continue
        let mean = 0
        for (const hop of hops) mean += (flags[p + hop] === 0 ? from[p + hop]! : flags[p + hop] === 3 ? 1 : from[p]!) / 6
        to[p] = (1 - vesicle.mobilityFactor) * from[p]! + vesicle.mobilityFactor * mean
      }
      to[site]! -= taken
      within += taken
      logs[n + 1]! += vesicle.number === null ? plan.occupancy * vesicle.share * within : -vesicle.number * Math.log1p(-within / plan.freeVoxels)
      from = to
    }
  }
  return Array.from(plan.sampleSteps, n => 1 - (1 - plan.initialFill) * Math.exp(-logs[n]!))
}

describe('exactIsolatedFilled', () => {
  it.each<[string, Bend]>([
    ['held', {}],
    ['held, certain attachment', { sites: [{ name: 'only', share: 1, attachProbability: 1 }] }],
    ['sealed, odd', { reservoir: { supply: 'sealed', sizeUm: [0.55, 0.55, 0.45] } }],
    ['sealed, even and lopsided', { reservoir: { supply: 'sealed', sizeUm: [0.6, 0.5, 0.4] } }],
    ['initial fill', { schedule: { durationS: 8, sampleEveryMs: 50, initialFill: 0.4 } }],
    ['two kinds, one slow', { vesicles: [{ name: 'able', share: 0.4, attachFactor: 0.8 }, { name: 'slow', share: 0.6, mobilityFactor: 0.3 }] }],
    ['one kind stuck', { vesicles: [{ name: 'free', share: 0.4 }, { name: 'stuck', share: 0.6, mobilityFactor: 0 }] }],
    ['decline', { schedule: { durationS: 8, sampleEveryMs: 50, decline: { restFactor: 0.2, timeConstantS: 0.5 } } }],
  ])('equals the unfolded solution without continuation: %s', (_name, bend) => {
    const scenario = isolated(bend)
    const exact = exactIsolatedFilled(scenario, compilePlan(scenario))!
    const other = bruteForce(scenario)
    expect(exact.filled.length).toBe(other.length)
    exact.filled.forEach((value, i) => expect(Math.abs(value - other[i]!)).toBeLessThan(1e-6))
  })
  it('continues: far fewer steps solved than asked for', () => {
    const scenario = isolated({ schedule: { durationS: 60, sampleEveryMs: 100 } })
    const plan = compilePlan(scenario), exact = exactIsolatedFilled(scenario, plan)!
    expect(plan.steps).toBe(14_400)
    expect(exact.solvedSteps).toBeLessThan(1500)
    expect(exact.tauS).toBeGreaterThan(1 / 1.2)
  })
  it('gives the ready curve by the per-step chance, behind the filled one', () => {
    const scenario = isolated({ sites: [{ name: 'only', share: 1, attachProbability: 0.3, readyPerS: 4 }] })
    const exact = exactIsolatedFilled(scenario, compilePlan(scenario))!
    expect(exact.ready!.every((ready, i) => ready <= exact.filled[i]! + 1e-15)).toBe(true)
    expect(exact.ready![1]).toBeLessThan(0.2 * exact.filled[1]!)
    expect(exact.ready!.at(-1)).toBeGreaterThan(0.99)
  })
  it('takes at most 100 ms at a margin of 12', () => {
    const scenario = isolated({ reservoir: { supply: 'held', marginSites: 12 }, schedule: { durationS: 40, sampleEveryMs: 20 } })
    const plan = compilePlan(scenario)
    exactIsolatedFilled(scenario, plan)
    const times = [1, 2, 3, 4, 5].map(() => {
      const start = performance.now()
      exactIsolatedFilled(scenario, plan)
      return performance.now() - start
    }).sort((a, b) => a - b)
    expect(times[0]).toBeLessThan(100)
  })
  it('counts every vesicle of a sealed terminal in the end', () => {
    const plan = compilePlan(isolated({ reservoir: { supply: 'sealed', sizeUm: [0.35, 0.35, 0.35] }, sites: [{ name: 'only', share: 1, attachProbability: 1 }], schedule: { durationS: 300, sampleEveryMs: 1000 } }))
    const flux = cumulativeFlux(linearLattice(plan), { attach: 1, mobility: 1, steps: plan.steps, bath: 0, budget: 1e8, longestAxis: 7 })!
    expect(Math.abs(flux.within(plan.steps) / plan.freeVoxels - 1)).toBeLessThan(1e-5)
    expect(flux.solved).toBeLessThan(plan.steps)
  })
  it('says when it does not apply, and returns null beyond its budget', () => {
    expect(notExactBecause(isolated())).toBeNull()
    for (const bend of [{ ribbon: { shape: 'plate', rows: 1, columns: 2, faces: 1, classLayout: 'rows' } }, { reservoir: { supply: 'stirred' } },
      { medium: { crowding: 'exclusive' } }, { sites: [{ name: 'only', share: 1, attachProbability: 0.3, detachPerS: 1 }] },
      { schedule: { durationS: 8, sampleEveryMs: 50, releases: [{ atMs: 100, fraction: 1 }] } }] as Bend[]) {
      const scenario = isolated(bend)
      expect(notExactBecause(scenario)).toMatch(/\.$/)
      expect(exactIsolatedFilled(scenario, compilePlan(scenario))).toBeNull()
    }
    const wide = isolated({ reservoir: { supply: 'held', marginSites: 64 }, schedule: { durationS: 60, sampleEveryMs: 100 } })
    expect(exactIsolatedFilled(wide, compilePlan(wide))).toBeNull()
  })
  it('stays empty, and has no τ, when nothing attaches', () => {
    const scenario = isolated({ sites: [{ name: 'only', share: 1, attachProbability: 0 }] })
    const exact = exactIsolatedFilled(scenario, compilePlan(scenario))!
    expect(exact.tauS).toBeNull()
    expect(exact.filled.every(value => value === 0)).toBe(true)
  })
})
