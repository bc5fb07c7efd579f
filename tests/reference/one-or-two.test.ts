/** The parametric bootstrap of one exponential against two: its law under one exponential, its size, and its certainty. */
import { describe, expect, it } from 'vitest'
import { bootstrapOneAgainstTwo } from '../../shared/fitting/bootstrap'
import { normalDeviates } from '../../shared/fitting/deviates'
import { searchConditions, type SearchedFit } from '../../shared/fitting/fit'
import { fitBoth } from '../../shared/fitting/fit-both'
import type { ExponentialModel } from '../../shared/fitting/recovery-model'
import { recoveryCurve } from '../../shared/fitting/recovery-model'
import type { ConditionData } from '../../shared/recordings/types'
import { accepted, made, streamOf } from '../unit/fitting/support'
import { conditionOf, CONTROL, WORKED_TIMES_S } from './recovery-data'

const searched = (model: ExponentialModel, condition: ConditionData): SearchedFit => accepted(searchConditions([condition], { model, depletion: 'complete' }))

it('Box and Muller’s deviates have the moments of the normal law: mean 0, variance 1, kurtosis 3 (4 standard errors)', () => {
  const count = 200_001, deviates = new Float64Array(count)
  normalDeviates(streamOf('moments'), deviates)
  const moment = (power: number) => deviates.reduce((sum, z) => sum + z ** power, 0) / count
  expect(Math.abs(moment(1))).toBeLessThan(4 / Math.sqrt(count))
  expect(Math.abs(moment(2) - 1)).toBeLessThan(4 * Math.sqrt(2 / count))
  expect(Math.abs(moment(3))).toBeLessThan(4 * Math.sqrt(15 / count))
  expect(Math.abs(moment(4) - 3)).toBeLessThan(4 * Math.sqrt(96 / count))
})

describe('under one exponential', () => {
  it('T-21 95 per cent point of χ²₁ − χ²₂ for nine intervals, τ = 1.2 s, SD of a mean 0.0408: 4.46 ± 0.3 (2,500 runs of another program), well below the 5.99 of χ² with two degrees of freedom', () => {
    const exact = conditionOf(WORKED_TIMES_S, recoveryCurve([{ name: 'tauS', value: 1.2 }], WORKED_TIMES_S), { sem: 0.0408 })
    const found = bootstrapOneAgainstTwo(searched('one', exact), searched('two', exact), { resamples: 4000, seed: 'T-21' })!
    expect(Math.abs(found.critical95 - 4.46)).toBeLessThan(0.3)
    expect([found.statistic, found.p]).toEqual([expect.closeTo(0, 6), 1])
  })
  it('p ≤ 0.05 comes in about 5 of 100 sets (seeded, 120 sets of 99 resamples; 4 standard errors are 8 per cent)', () => {
    const stream = streamOf('size')
    let low = 0
    for (let i = 0; i < 120; i++) {
      const condition = made([{ name: 'tauS', value: 2 }], 0.011, stream)
      low += bootstrapOneAgainstTwo(searched('one', condition), searched('two', condition), { resamples: 99, seed: `size ${i}` })!.p <= 0.05 ? 1 : 0
    }
    expect(low / 120).toBeLessThan(0.13)
    expect(low).toBeGreaterThan(0)
  })
})

describe('both fits together', () => {
  it('two never fit worse than one; criteria share the s of the better fit; p is the least there is where two are true', () => {
    const { fits: [one, two], bootstrap } = accepted(fitBoth([CONTROL], {}))
    expect(two.chi2).toBeLessThan(one.chi2)
    expect([one.scale, one.criterion]).toEqual([two.scale, expect.closeTo(one.chi2 + 4, 9)])
    expect(bootstrap).toMatchObject({ p: 0.001, resamples: 999 })
    expect(bootstrap!.statistic).toBeCloseTo(one.chi2 - two.chi2, 9)
  })
  it('on one-exponential data χ² of the two is at or below that of the one, every time', () => {
    const stream = streamOf('nested')
    for (let i = 0; i < 20; i++) {
      const { fits: [one, two] } = accepted(fitBoth([made([{ name: 'tauS', value: 1 }], 0.02, stream)], {}, { resamples: 99 }))
      expect(two.chi2).toBeLessThanOrEqual(one.chi2 * (1 + 1e-7))
    }
  })
  it('the same seed gives the same p, another seed draws other sets; without weights it compares logarithms', () => {
    const weak = made([{ name: 'fastShare', value: 0.8 }, { name: 'tauFastS', value: 1 }, { name: 'tauSlowS', value: 4 }], 0.02, streamOf('weak'))
    const run = (seed: string, weights: 'sem' | 'none' = 'sem') => accepted(fitBoth([weak], { weights }, { seed, resamples: 199 }))
    expect(run('a').bootstrap).toEqual(run('a').bootstrap)
    expect(run('a').bootstrap!.critical95).not.toBe(run('b').bootstrap!.critical95)
    const { fits: [one, two], bootstrap } = run('a', 'none')
    expect(bootstrap!.statistic).toBeCloseTo(11 * Math.log(one.chi2 / two.chi2), 6)
  })
  it('can be ended early, and then says nothing', () => {
    expect(accepted(fitBoth([CONTROL], {}, { progress: done => done < 100 })).bootstrap).toBeNull()
  })
})
