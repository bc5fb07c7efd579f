/** Outside checks of the statistics behind an outcome: published tables and textbook laws, the source beside each. */
import { describe, expect, it } from 'vitest'
import { meanHalfWidth, resampledIntervals, RESAMPLES } from '../../shared/walk/intervals'
import { normalBelow, studentQuantile975, twoSidedTail } from '../../shared/walk/normal'
import { compilePlan } from '../../shared/walk/plan'
import { generator } from '../unit/outcome/support'
import { smallScenario, walkBlocks, walkOutcome } from '../unit/outcome/walked'
import { mergeAll } from '../../shared/walk/merge'

describe('normal and Student’s law', () => {
  it.each([[4, 2.7764451], [12, 2.1788128], [18, 2.1009220], [28, 2.0484071], [1, 12.7062047]])('97.5 per cent quantile of t, %i degrees of freedom: %f (NIST/SEMATECH e-Handbook, table of t)', (degrees, quantile) => {
    expect(studentQuantile975(degrees)).toBeCloseTo(quantile, 6)
  })
  it('tends to the normal quantile 1.9599640', () => {
    expect(Math.abs(studentQuantile975(2000) - 1.959964)).toBeLessThan(0.0013)
    expect(studentQuantile975(5000)).toBeCloseTo(1.959964, 6)
  })
  it.each([[1.959963984540054, 0.05], [2.5758293035489004, 0.01], [3.290526731491926, 0.001], [0, 1]])('two-sided tail at %f is %f (Abramowitz & Stegun, table 26.2 and 26.6)', (z, tail) => {
    expect(Math.abs(twoSidedTail(z) / tail - 1)).toBeLessThan(1e-10)
    expect(twoSidedTail(-z)).toBe(twoSidedTail(z))
  })
  it('far tail: erfc(5) = 1.5374598e-12 (Abramowitz & Stegun, chapter 7)', () => {
    expect(Math.abs(twoSidedTail(5 * Math.SQRT2) / 1.5374597944280e-12 - 1)).toBeLessThan(1e-8)
    expect(normalBelow(1.2815515655446004)).toBeCloseTo(0.9, 12)
  })
})

describe('resampling', () => {
  const of = (values: number[], statistic: (sum: number, n: number) => number) => resampledIntervals({
    replicates: values.length, width: 2, count: 1, seedLow: 1, seedHigh: 2, read: (i, column) => column === 0 ? values[i]! : 1,
    statistics: (sums, out) => { out[0] = statistic(sums[0]!, sums[1]!) },
  })[0]!

  it('spread of resampled means of {1, 2, 4}: √(Σ(x − x̄)²/n²) = 0.72008230 (Efron & Tibshirani 1993; exact over the 27 resamples)', () => {
    const means: number[] = []
    resampledIntervals({
      replicates: 3, width: 1, count: 1, seedLow: 7, seedHigh: 8, read: i => [1, 2, 4][i]!,
      statistics: (sums, out) => {
        out[0] = sums[0]! / 3
        means.push(out[0])
      },
    })
    expect(means).toHaveLength(RESAMPLES)
    const mean = means.reduce((sum, one) => sum + one, 0) / RESAMPLES
    const spread = Math.sqrt(means.reduce((sum, one) => sum + (one - mean) ** 2, 0) / RESAMPLES)
    expect(Math.abs(mean - 7 / 3)).toBeLessThan(4 * 0.7201 / Math.sqrt(RESAMPLES))
    expect(Math.abs(spread / 0.72008230 - 1)).toBeLessThan(4 / Math.sqrt(2 * RESAMPLES))
  })

  it('a mean of many: the interval is mean ± 1.96 σ/√n within the resampling’s own noise', () => {
    const random = generator(5)
    const values = Array.from({ length: 5000 }, random), mean = values.reduce((sum, one) => sum + one, 0) / 5000
    const { low, high } = of(values, (sum, n) => sum / n)
    const half = 1.96 * Math.sqrt(1 / 12 / 5000)
    expect(Math.abs(low! - (mean - half))).toBeLessThan(0.2 * half)
    expect(Math.abs(high! - (mean + half))).toBeLessThan(0.2 * half)
  })
  it('draws the same from the same words, and leaves an undefined bound open', () => {
    expect(of([1, 2, 4, 8], (sum, n) => sum / n)).toEqual(of([1, 2, 4, 8], (sum, n) => sum / n))
    expect(of([1], (sum, n) => sum / n)).toEqual({ low: null, high: null })
    expect(of([0, 0, 0, 1], (sum, n) => n / sum).high).toBeNull()
  })
  it('half width of a mean, n = 5, s² = 1: t₀.₉₇₅(4)/√5', () => expect(meanHalfWidth(1, 5)).toBeCloseTo(2.7764451 / Math.sqrt(5), 6))
})

describe('the walk on a stirred supply', () => {
  // 20 sites, p per step from the discrete law (1 − p)ⁿ; binomial noise N·P(1 − P).
  const scenario = smallScenario(), plan = compilePlan(scenario), replicates = 2000
  const chance = plan.occupancy / 6 * plan.attachProbability[0]![0]!
  it('mean and variance of the filled count are binomial at every sample, 4 standard errors', () => {
    const outcome = walkOutcome(scenario, 'stirred', 'binomial', replicates)
    plan.sampleSteps.forEach((step, i) => {
      const filled = 1 - (1 - chance) ** step, variance = 20 * filled * (1 - filled)
      const kurtosis = variance > 0 ? 3 + (1 - 6 * filled * (1 - filled)) / variance : 3
      expect(Math.abs(outcome.classes[0]!.meanFilled[i]! - 20 * filled)).toBeLessThanOrEqual(4 * Math.sqrt(variance / replicates) + 1e-12)
      expect(Math.abs(outcome.varFilledTotal[i]! - variance)).toBeLessThanOrEqual(4 * variance * Math.sqrt((kurtosis - 1) / replicates) + 1e-12)
    })
  })
  it('attachments until the end are geometric in time: first-attachment histogram by χ², 4 standard errors', () => {
    const block = mergeAll(walkBlocks(scenario, 'stirred', 'geometric', replicates))
    let statistic = 0, cells = 0
    block.firstAttachment.forEach((seen, bin) => {
      const expected = 20 * replicates * ((1 - chance) ** (bin * plan.histogramBinSteps) - (1 - chance) ** Math.min(plan.steps, (bin + 1) * plan.histogramBinSteps))
      if (expected < 5) return
      statistic += (seen - expected) ** 2 / expected
      cells++
    })
    expect(cells).toBeGreaterThan(100)
    expect(Math.abs(statistic - cells)).toBeLessThan(4 * Math.sqrt(2 * cells))
  })
})
