/** Two kinds of vesicle (V-01 to V-07) against two kinds of site (S-01 to S-04): digits computed independently. */
import { describe, expect, it } from 'vitest'
import { closedForm, closedFormFilled } from '../../shared/kinetics/closed-form'
import * as mixtures from '../../shared/kinetics/mixtures'
import { filledNoise } from '../../shared/kinetics/waiting'
import { ScenarioSchema, type ScenarioInput } from '../../shared/schemas/scenario'
import { expectRelative } from './support'

const vesicle = (densityPerUm3: number, attachProbability: number, diffusionUm2PerS = 0.11) => ({ diffusionUm2PerS, densityPerUm3, attachProbability })
const times = [0.25, 0.5, 1, 2, 5, 10]

function scenarioOf(differs: Pick<ScenarioInput, 'sites' | 'vesicles'>) {
  return ScenarioSchema.parse({
    format: 'moorage-scenario', version: 1, title: 'Check', medium: { spacingNm: 45, diffusionUm2PerS: 0.11, densityPerUm3: 2000, crowding: 'independent' },
    ribbon: { shape: 'plate', rows: 4, columns: 5, faces: 1, classLayout: 'interleaved' }, reservoir: { supply: 'stirred' }, schedule: { durationS: 60, sampleEveryMs: 100 }, ...differs,
  })
}

describe('V: two kinds of vesicle', () => {
  it('V-01 to V-04 one exponential with the summed rate', () => {
    const rates = [
      mixtures.mixedRate(0.045, [vesicle(1000, 0.2), vesicle(1000, 0.02)]), mixtures.mixedRate(0.045, [vesicle(1000, 0.1), vesicle(1000, 0.1, 0.015)]),
      mixtures.mixedRate(0.045, [vesicle(500, 0.2), vesicle(1500, 0.02)]), mixtures.mixedRate(0.045, [vesicle(2000, 0.02)]),
    ]
    expectRelative(rates.map(rate => 1 / rate), [0.91827365, 1.7777778, 1.5540016, 5.0505051], 3e-8)
    expectRelative(rates.slice(0, 2), [1.089, 0.5625], 1e-12)
  })
  it('V-01, V-05 the scenario\'s closed form gives the same curve', () => {
    const scenario = scenarioOf({ sites: [{ name: 'site', share: 1, attachProbability: 0.2 }], vesicles: [{ name: 'able', share: 0.5 }, { name: 'poor', share: 0.5, attachFactor: 0.1 }] })
    expectRelative([closedForm(scenario).tauS!], [0.91827365], 1e-8)
    expectRelative(closedFormFilled(scenario, times).filled[0]!.map(filled => filled / 20), [0.23833618, 0.41986823, 0.66344712, 0.88673216, 0.99568216, 0.99998136], 3e-8)
  })
  it('V-06 a store that is used up, quick ones first', () => {
    const at = [0.1, 0.25, 0.5, 1, 2, 4].map(t => mixtures.mixedStoreFilled(100, [{ count: 50, perSitePerS: 0.02 }, { count: 1000, perSitePerS: 0.001 }], t))
    expectRelative(at.map(one => one.filled), [17.362329, 36.25977, 56.822279, 78.501619, 93.984255, 99.47346], 1e-7)
    expectRelative([at[0]!.used[0]!, at[5]!.used[0]!], [8.3124742, 36.411114], 1e-7)
  })
  it('V-07 one kind, finite store, and where the store equals the sites', () => {
    expectRelative([0.5, 1, 2, 4].map(t => mixtures.finiteStoreFilled(100, 400, 1, t)), [37.758893, 59.828602, 82.276581, 96.218907], 2e-8)
    expectRelative([0.5, 1, 2, 4].map(t => mixtures.finiteStoreFilled(100, 100, 1, t)), [33.333333, 50, 66.666667, 80], 2e-8)
    expectRelative([1 - 1e-9, 1 + 1e-9, 1 - 1e-5, 1 + 1e-5].map(x => mixtures.finiteStoreFilled(100, 100 * x, 1, 1)), [50, 50, 50, 50], 1e-4)
    expectRelative([mixtures.mixedStoreFilled(100, [{ count: 400, perSitePerS: 1 / 400 }], 1).filled], [59.828602], 2e-8)
  })
})

describe('S: two kinds of site', () => {
  const kinds = (share: number) => [{ share, tauS: 0.50505051 }, { share: 1 - share, tauS: 5.0505051 }]
  it('S-01, S-02 fixed time constants, amplitudes are shares', () => {
    expectRelative(times.map(t => mixtures.mixedSitesFilled(kinds(0.5), t)), [0.21936197, 0.3613403, 0.52078045, 0.65396509, 0.81418657, 0.93096538], 3e-8)
    expectRelative(times.map(t => mixtures.mixedSitesFilled(kinds(0.25), t)), [0.1338284, 0.2277988, 0.3502053, 0.4904792, 0.72130494, 0.89644807], 5e-8)
  })
  it('S-01 the scenario\'s closed form gives the same curve', () => {
    const scenario = scenarioOf({ sites: [{ name: 'able', share: 0.5, attachProbability: 0.2 }, { name: 'poor', share: 0.5, attachProbability: 0.02 }], vesicles: [{ name: 'vesicle', share: 1 }] })
    const { filled } = closedFormFilled(scenario, times)
    expectRelative(times.map((_time, i) => (filled[0]![i]! + filled[1]![i]!) / 20), [0.21936197, 0.3613403, 0.52078045, 0.65396509, 0.81418657, 0.93096538], 3e-8)
    expect(closedForm(scenario).tauS).toBeCloseTo(2.7777778, 7)
  })
  it('S-03 the initial slope equals V-01; mean and half time', () => {
    const { slopePerS, meanTauS, halfTimeS } = mixtures.mixedSitesSummary(kinds(0.5))
    expectRelative([slopePerS, meanTauS, halfTimeS], [1.089, 2.7777778, 0.91024695], 2e-8)
  })
  it('S-04 the noise tells them apart at equal mean', () => {
    const filled = [0.50505051, 5.0505051].map(tau => -Math.expm1(-1 / tau))
    const sites = filledNoise(filled.map(p => ({ sites: 10, filled: p }))), mean = (filled[0]! + filled[1]!) / 2
    expectRelative([sites.sd ** 2, filledNoise([{ sites: 20, filled: mean }]).sd ** 2], [2.6636928, 4.9913635], 5e-8)
  })
})
