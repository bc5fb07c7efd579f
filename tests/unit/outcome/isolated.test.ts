/** The isolated site against its exact mean ratio (own lattice solve of the flux into an always-empty site; held box 21 × 21 × 11, ρa³ = 0.201386), 4 standard errors. */
import { describe, expect, it } from 'vitest'
import { smallScenario, walkOutcome } from './walked'

// The trade's values, common practice, no source: 45 nm, 0.11 µm²/s, 2,210 /µm³.
const isolated = (s: number) => smallScenario({
  medium: { spacingNm: 45, diffusionUm2PerS: 0.11, densityPerUm3: 2210, crowding: 'independent' },
  ribbon: { shape: 'isolated' }, reservoir: { supply: 'held', marginSites: 10 },
  sites: [{ name: 'site', share: 1, attachProbability: s }], schedule: { durationS: 1.6 / s, sampleEveryMs: 100 },
})

describe.each([
  ['attempt', 40_000], ['touch', 20_000], ['step', 1_500],
] as const)('%s', (algorithm, replicates) => {
  it.each([[1, 1.29567], [0.5, 1.15504], [0.1, 1.03324]])('s = %d: mean ratio %d', (s, exact) => {
    const { ratio, agreement, tau } = walkOutcome(isolated(s), algorithm, `isolated ${s}`, replicates)
    expect(tau.unfilledShare).toBeLessThan(1e-3) // so that the ratio is the plain mean over τ
    const standardError = (ratio.high! - ratio.low!) / 2 / 1.96
    expect(standardError).toBeLessThan(2.2 / Math.sqrt(replicates))
    expect(Math.abs(ratio.value! - exact)).toBeLessThan(4 * standardError)
    if (s === 1) expect(agreement).toMatchObject({ verdict: 'slower', reason: 'own-neighbourhood' })
    if (s === 1) expect(agreement.pValue!).toBeLessThan(1e-4)
  })
})
