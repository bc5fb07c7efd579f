/** Tails, criteria and nested tests against published tables and worked values. */
import { describe, expect, it } from 'vitest'
import { akaikeWeights, boundaryTail, excessScatter, knownErrorCriterion, nestedF, scatterCriteria } from '../../shared/fitting/criteria'
import { chiSquaredAbove, chiSquaredCritical, fAbove, logGamma } from '../../shared/fitting/tails'
import { expectRelative } from './support'

describe('tails', () => {
  it('logarithm of the gamma function: Γ(½) = √π, Γ(5) = 24, Γ(101) = 100! (Abramowitz & Stegun, chapter 6)', () => {
    expectRelative([logGamma(0.5), logGamma(5), logGamma(101)], [Math.log(Math.PI) / 2, Math.log(24), 363.73937555556347], 1e-14)
    expect(Math.abs(logGamma(1))).toBeLessThan(1e-14)
  })
  it('T-25 critical values of χ², 95 and 99 per cent (NIST/SEMATECH e-Handbook, table of χ²)', () => {
    expectRelative([1, 2, 3, 4, 5, 9, 10].map(dof => chiSquaredCritical(0.05, dof)), [3.8414588, 5.9914645, 7.8147279, 9.4877290, 11.070498, 16.918978, 18.307038], 1e-7)
    expectRelative([1, 2, 3].map(dof => chiSquaredCritical(0.01, dof)), [6.6348966, 9.2103404, 11.344867], 1e-7)
  })
  it('T-26 goodness of fit of counts 18, 22, 29, 31 against 25 each: 4.4, p 0.22138539 (Pearson 1900)', () => {
    const statistic = [18, 22, 29, 31].reduce((sum, seen) => sum + (seen - 25) ** 2 / 25, 0)
    expect(statistic).toBeCloseTo(4.4, 12)
    expectRelative([chiSquaredAbove(statistic, 3)], [0.22138539], 3e-8)
  })
  it('T-29 exact 95 per cent interval of an exponential mean, n = 20, mean 1: 2n/χ²₂ₙ, 0.67406217 to 1.6371275', () => {
    expectRelative([40 / chiSquaredCritical(0.025, 40), 40 / chiSquaredCritical(0.975, 40)], [0.67406217, 1.6371275], 3e-8)
  })
  it('two degrees of freedom are exactly exponential, far into the tail', () => {
    expectRelative([0.1, 1, 5, 50, 600].map(x => chiSquaredAbove(x, 2)), [0.1, 1, 5, 50, 600].map(x => Math.exp(-x / 2)), 1e-12)
    expect(chiSquaredAbove(0, 3)).toBe(1)
  })
  it('T-17 critical values of F at 5 per cent: 5.1432528 (2, 6), 4.4589701 (2, 8) (NIST/SEMATECH e-Handbook, table of F)', () => {
    expectRelative([fAbove(5.1432528, 2, 6), fAbove(4.4589701, 2, 8)], [0.05, 0.05], 1e-7)
    // With two degrees above, the tail is (1 + 2F/ν)^(−ν/2).
    expectRelative([fAbove(0.3, 2, 7), fAbove(40, 2, 5)], [(1 + 0.6 / 7) ** -3.5, 17 ** -2.5], 1e-12)
    expect([fAbove(0, 2, 7), fAbove(-1, 2, 7)]).toEqual([1, 1])
  })
})

describe('criteria', () => {
  it('T-15 AICc of n = 9, RSS = 0.001, k = 4: −63.944819 (Hurvich & Tsai 1989, Biometrika 76:297); none where n ≤ k + 1', () => {
    expectRelative([scatterCriteria(9, 0.001, 4).aicc!], [-63.944819], 1e-8)
    expect(scatterCriteria(5, 0.001, 4).aicc).toBeNull()
    expect(scatterCriteria(6, 0.001, 4).aicc).not.toBeNull()
  })
  it('T-16 Akaike weights at Δ = 0, 4 (Burnham & Anderson 2002)', () => {
    expectRelative(akaikeWeights([104, 100]), [0.11920292, 0.88079708], 2e-8)
    expect(akaikeWeights([1e5, 0])).toEqual([0, 1])
  })
  it('T-17 nested F of the two worked fits: 457.25834, p 2.7692e-7', () => {
    const { f, p } = nestedF({ rss: 0.09009861766, parameters: 1 }, { rss: 5.872698610e-4, parameters: 3 }, 9)
    expectRelative([f], [457.25834], 1e-7)
    expectRelative([p], [2.7692e-7], 2e-5)
  })
  it('T-19 naive likelihood ratio of the same: n·ln(RSS₁/RSS₂) = 45.298581', () => {
    const [one, two] = [scatterCriteria(9, 0.09009861766, 2), scatterCriteria(9, 5.872698610e-4, 4)]
    expectRelative([one.aic - two.aic + 4], [45.298581], 1e-7)
    expect(one.bic - two.bic).toBeCloseTo(45.298581 - 2 * Math.log(9), 5)
  })
  it('T-20 law of a likelihood ratio with one parameter on its boundary (Self & Liang 1987, JASA 82:605)', () => {
    expectRelative([boundaryTail(2.7055435, 1), boundaryTail(5.4118944, 1), boundaryTail(5.1383808, 2), chiSquaredAbove(2.7055435, 1)], [0.05, 0.01, 0.05, 0.1], 1e-6)
    expect(boundaryTail(0, 1)).toBe(1)
  })
  it('a scatter that the errors explain is not divided away', () => {
    expect([excessScatter(7, 9), excessScatter(18, 9), excessScatter(3, 0)]).toEqual([1, 2, 1])
    expect(knownErrorCriterion(18, 2, 4)).toBe(17)
  })
})
