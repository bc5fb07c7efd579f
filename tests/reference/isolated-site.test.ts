/**
 * One site face on a reflecting wall: the lattice solution against the image method on the lattice (Watson 1939) and against independent full walks.
 * D = 0.11 µm²/s, a = 45 nm, ρ = 2210 /µm³ are common practice, no source; the ratios depend on ρa³ = 0.201386 and s alone.
 */
import { describe, expect, it } from 'vitest'
import { closedForm } from '../../shared/kinetics/closed-form'
import { exactIsolatedFilled } from '../../shared/kinetics/isolated'
import { cumulativeFlux } from '../../shared/kinetics/isolated-flux'
import { faceResistance } from '../../shared/kinetics/lattice-constants'
import { linearLattice } from '../../shared/kinetics/linear-lattice'
import { ScenarioSchema, type Scenario } from '../../shared/schemas/scenario'
import { compilePlan } from '../../shared/walk/plan'

function isolated(attachProbability: number, marginSites: number, durationS = 60): Scenario {
  return ScenarioSchema.parse({
    format: 'moorage-scenario', version: 1, title: 'Isolated site',
    medium: { spacingNm: 45, diffusionUm2PerS: 0.11, densityPerUm3: 2210, crowding: 'independent' },
    ribbon: { shape: 'isolated' }, reservoir: { supply: 'held', marginSites },
    sites: [{ name: 'site', share: 1, attachProbability }], vesicles: [{ name: 'vesicle', share: 1 }],
    schedule: { durationS, sampleEveryMs: 20 },
  })
}

describe('isolated site, held box 21 × 21 × 11', () => {
  it.each([[1, 1.29567], [0.5, 1.15504], [0.1, 1.03324]])('s = %s: mean attachment time over τ is %s', (s, ratio) => {
    const scenario = isolated(s, 10), plan = compilePlan(scenario)
    expect([plan.nx, plan.ny, plan.nz]).toEqual([21, 21, 11])
    expect(plan.occupancy).toBeCloseTo(0.201386, 6)
    const exact = exactIsolatedFilled(scenario, plan)!
    expect(Math.abs(exact.tauS! / closedForm(scenario).tauS! - ratio)).toBeLessThan(6e-6)
  })
  it('agrees with full per-vesicle walks of a separate program: 1.2828(91), 1.1476(81), 1.0399(74) from 20 000 replicates each', () => {
    for (const [s, walked, se] of [[1, 1.2828, 0.0091], [0.5, 1.1476, 0.0081], [0.1, 1.0399, 0.0074]] as const) {
      const scenario = isolated(s, 10)
      expect(Math.abs(exactIsolatedFilled(scenario, compilePlan(scenario))!.tauS! / closedForm(scenario).tauS! - walked)).toBeLessThan(4 * se)
    }
  })
  it('reaches 63.2 % at 1.2709 τ for s = 1', () => {
    const scenario = isolated(1, 10, 2), plan = compilePlan(scenario), tauS = closedForm(scenario).tauS!
    const { filled } = exactIsolatedFilled({ ...scenario, schedule: { ...scenario.schedule } }, { ...plan, sampleSteps: Uint32Array.from({ length: 200 }, (_unused, n) => n) })!
    const after = filled.findIndex(value => value >= 1 - Math.exp(-1))
    const part = (1 - Math.exp(-1) - filled[after - 1]!) / (filled[after]! - filled[after - 1]!)
    expect((after - 1 + part) * plan.stepS / tauS).toBeCloseTo(1.2709, 2)
  })
})

describe('long-time resistance', () => {
  it('of three boxes, extrapolated in 1/size, meets the image method within 0.5 %; Watson 1939', () => {
    const points = [10, 15, 20].map((margin) => {
      const plan = compilePlan(isolated(1, margin, 60))
      const flux = cumulativeFlux(linearLattice(plan), { attach: 1, mobility: 1, steps: plan.steps, bath: 1, budget: 1e9, longestAxis: plan.nx })!
      return { inverse: 1 / plan.nx, resistance: 1 / 6 / flux.steady - 1 }
    })
    // Boxes of 21, 31 and 41 voxels by a separate program: 1.32631, 1.33018, 1.33221.
    points.forEach((point, i) => expect(Math.abs(1 + point.resistance - [1.32631, 1.33018, 1.33221][i]!)).toBeLessThan(2e-5))
    const mean = (key: 'inverse' | 'resistance') => points.reduce((sum, point) => sum + point[key], 0) / points.length
    const slope = points.reduce((sum, point) => sum + (point.inverse - mean('inverse')) * (point.resistance - mean('resistance')), 0)
      / points.reduce((sum, point) => sum + (point.inverse - mean('inverse')) ** 2, 0)
    const extrapolated = mean('resistance') - slope * mean('inverse')
    expect(Math.abs(extrapolated / faceResistance() - 1)).toBeLessThan(0.005)
    expect(faceResistance()).toBeCloseTo(0.338795, 6)
  })
})
