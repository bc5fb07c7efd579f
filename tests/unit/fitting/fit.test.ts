/** Fits of one condition: truth comes back, weights do what they say, intervals hold it, refusals and warnings stand where they belong. */
import { describe, expect, it } from 'vitest'
import { fitCondition, type RecoveryFit } from '../../../shared/fitting/fit'
import type { FitOptions } from '../../../shared/fitting/fit-design'
import { pooledSdOf, weightedPoints } from '../../../shared/fitting/point-errors'
import { recoveryAt, recoveryCurve, type NamedValue } from '../../../shared/fitting/recovery-model'
import type { ConditionData, SummaryPoint } from '../../../shared/recordings/types'
import { conditionOf, CONTROL } from '../../reference/recovery-data'
import { accepted, codesOf, made, refusedOf, streamOf, TIMES_S, valueOf } from './support'

const TWO: NamedValue[] = [{ name: 'depletion', value: 0.88 }, { name: 'fastShare', value: 0.6 }, { name: 'tauFastS', value: 0.83 }, { name: 'tauSlowS', value: 20 }]
const ONE: NamedValue[] = [{ name: 'depletion', value: 0.7 }, { name: 'tauS', value: 1.5 }]
const fitted = (condition: ConditionData, options: FitOptions): RecoveryFit => accepted(fitCondition(condition, options))
const changed = (condition: ConditionData, i: number, change: Partial<SummaryPoint>): ConditionData => ({ ...condition, points: condition.points.map((point, k) => k === i ? { ...point, ...change } : point) })

describe('the curve', () => {
  it('has the derivatives that differences give', () => {
    const at = [0.95, 0.8, 0.55, Math.log(0.7), Math.log(9)], by = new Float64Array(5), step = 1e-6
    for (const time of [0, 0.03, 0.7, 4, 60]) {
      recoveryAt(at, time, by)
      at.forEach((_, place) => {
        const moved = (by: number) => recoveryAt(at.map((value, k) => k === place ? value + by : value), time)
        expect(Math.abs(by[place]! - (moved(step) - moved(-step)) / (2 * step))).toBeLessThan(1e-9)
      })
    }
  })
  it('is drawn from the names alone', () => {
    expect(recoveryCurve([{ name: 'tauS', value: 2 }], [0, 2])).toEqual([0, 1 - Math.exp(-1)])
    expect(recoveryCurve([{ name: 'tauS', value: 2 }, { name: 'plateau', value: 0.9 }], [0])[0]).toBe(0)
    expect(() => recoveryCurve([{ name: 'depletion', value: 1 }], [1])).toThrow(RangeError)
  })
})

describe('a fit', () => {
  it.each([['two', TWO], ['one', ONE], ['two', [...TWO, { name: 'plateau', value: 0.93 }]], ['one', [...ONE, { name: 'plateau', value: 1.1 }]]] as [FitOptions['model'], NamedValue[]][])('of an exact curve with %s exponential(s) gives the truth back', (model, truth) => {
    const fit = fitted(made(truth, 0.01), { model, freePlateau: truth.some(one => one.name === 'plateau') })
    expect(fit.parameters.map(one => one.name).sort()).toEqual(truth.map(one => one.name).sort())
    for (const { name, value } of truth) expect(valueOf(fit, name) / value).toBeCloseTo(1, 7)
    expect(fit.chi2).toBeLessThan(1e-12)
    expect(fit).toMatchObject({ converged: true, points: 11, dof: 11 - truth.length, scale: 1 })
    expect(fit.criterion).toBeCloseTo(2 * truth.length, 9)
  })
  it.each([1e-3, 1, 1e3])('does not mind the time scale: %f', (factor) => {
    const times = TIMES_S.map(time => time * factor)
    const fit = fitted(made([{ name: 'depletion', value: 0.88 }, { name: 'fastShare', value: 0.6 }, { name: 'tauFastS', value: 0.83 * factor }, { name: 'tauSlowS', value: 20 * factor }], 0.01, undefined, {}, times), { model: 'two' })
    expect(valueOf(fit, 'tauFastS') / factor).toBeCloseTo(0.83, 6)
    expect(valueOf(fit, 'tauSlowS') / factor).toBeCloseTo(20, 5)
  })
  it('holds a typed depletion, and says so', () => {
    const fit = fitted(made(TWO, 0.01), { model: 'two', depletion: 0.88 })
    expect(fit.held).toEqual([{ name: 'plateau', value: 1 }, { name: 'depletion', value: 0.88 }])
    expect(fit.parameters.map(one => one.name)).toEqual(['fastShare', 'tauFastS', 'tauSlowS'])
    expect(valueOf(fit, 'tauSlowS')).toBeCloseTo(20, 6)
  })
  it('leaves out what was set aside', () => {
    const spoilt = changed(made(ONE, 0.01), 4, { ratio: 5, aside: 'seal lost' })
    expect(fitted(spoilt, { model: 'one' })).toMatchObject({ points: 10 })
    expect(valueOf(fitted(spoilt, { model: 'one' }), 'tauS')).toBeCloseTo(1.5, 6)
  })
  it('takes ratios outside 0 to 1, an interval of 0, and rows in any order', () => {
    const condition = made(ONE, 0.01)
    const odd = { ...condition, points: [...changed(changed(condition, 10, { ratio: 1.07 }), 0, { intervalMs: 0, ratio: 0.29 }).points].reverse() }
    expect(fitted(odd, { model: 'one' })).toMatchObject({ converged: true, points: 11 })
  })
  it('its profile interval stands where χ² has risen by 3.84', () => {
    const condition = made(TWO, 0.012, streamOf('profile')), fit = fitted(condition, { model: 'two' }), scale = Math.max(1, fit.chi2 / fit.dof)
    const depletion = fit.parameters[0]!
    for (const end of [depletion.low!, depletion.high!]) {
      const held = fitted(condition, { model: 'two', depletion: end })
      expect((held.chi2 - fit.chi2) / scale).toBeCloseTo(3.8414588, 3)
    }
  })
  it('holds the truth in about 95 of 100 intervals (seeded, 300 sets; 4 standard errors of a proportion are 5 per cent)', () => {
    const stream = streamOf('coverage')
    let share = 0, fast = 0
    for (let i = 0; i < 300; i++) {
      const fit = fitted(made(TWO, 0.012, stream), { model: 'two' })
      const holds = (name: string, truth: number) => fit.parameters.some(one => one.name === name && (one.low ?? -Infinity) <= truth && truth <= (one.high ?? Infinity))
      share += holds('fastShare', 0.6) ? 1 : 0
      fast += holds('tauFastS', 0.83) ? 1 : 0
    }
    for (const held of [share, fast]) expect(Math.abs(held / 300 - 0.95)).toBeLessThan(0.05)
  })
})

describe('weights', () => {
  it('pooled SD is Σ(n − 1)·SD² over Σ(n − 1); n = 1 adds nothing, a SEM stands for its SD', () => {
    const points = conditionOf([1, 2, 3], [0.1, 0.2, 0.3], { sd: 0.1, n: 5 })
    const mixed = changed(changed(points, 1, { sd: null, sem: 0.2 / Math.sqrt(3), n: 3 }), 2, { sd: null, n: 1 })
    expect(pooledSdOf([mixed])).toBeCloseTo(Math.sqrt((4 * 0.01 + 2 * 0.04) / 6), 12)
    const weighted = accepted(weightedPoints([mixed], { weights: 'pooled' }))
    expect(weighted.points[0]!.map(point => point.error / weighted.pooledSd!)).toEqual([1 / Math.sqrt(5), 1 / Math.sqrt(3), 1])
  })
  it('the demo’s control pools to 0.0363', () => expect(pooledSdOf([CONTROL])).toBeCloseTo(0.0363, 4))
  it('SEM weights make χ² of the residuals over their SEM', () => {
    const fit = fitted(CONTROL, { model: 'two' })
    expect(fit.chi2).toBeCloseTo(fit.residuals.reduce((sum, { residual, error }) => sum + (residual / error!) ** 2, 0), 9)
    expect(fit.residuals.map(one => one.error)).toEqual(CONTROL.points.map(one => one.sem))
  })
  it('without weights χ² is the plain sum, the errors come from the scatter, and AICc counts their variance', () => {
    const fit = fitted(CONTROL, { model: 'two', weights: 'none' }), sum = fit.residuals.reduce((total, { residual }) => total + residual ** 2, 0)
    expect(fit.chi2).toBeCloseTo(sum, 12)
    expect(fit.criterion).toBeCloseTo(11 * Math.log(sum / 11) + 10 + 60 / 5, 9)
    const alike = fitted({ ...CONTROL, points: CONTROL.points.map(point => ({ ...point, sem: 0.01 })) }, { model: 'two' })
    expect(fit.parameters[0]!.se! / alike.parameters[0]!.se!).toBeCloseTo(Math.sqrt(sum / 7) / 0.01, 6)
  })
  it('a missing SEM leaves all unweighted and is told; SD and n make up for it', () => {
    expect(fitted(changed(CONTROL, 3, { sem: null, sd: null }), { model: 'two' })).toMatchObject({ weights: 'none' })
    expect(codesOf(fitted(changed(CONTROL, 3, { sem: null, sd: null }), { model: 'two' }))).toContain('errors-missing')
    const made = fitted(changed(CONTROL, 3, { sem: null }), { model: 'two' })
    expect(made.weights).toBe('sem')
    expect(made.residuals[3]!.error).toBeCloseTo(0.044 / 3, 12)
  })
  it('a SEM of 0 asks for a floor', () => {
    const zero = changed(CONTROL, 2, { sem: 0 })
    expect(refusedOf(fitCondition(zero, { model: 'two' }))).toBe('zero-error')
    const floored = fitted(zero, { model: 'two', semFloor: 0.009 })
    expect(floored.residuals.map(one => one.error!).slice(0, 3)).toEqual([0.009, 0.019, 0.009])
    expect(codesOf(floored)).toContain('sem-floor')
  })
  it('pooled weights without n, or without any SD, are refused with their number', () => {
    expect(refusedOf(fitCondition(changed(CONTROL, 1, { n: null }), { model: 'one', weights: 'pooled' }))).toBe('n-missing')
    expect(refusedOf(fitCondition(conditionOf(TIMES_S, CONTROL.points.map(one => one.ratio), { n: 9 }), { model: 'one', weights: 'pooled' }))).toBe('sd-missing')
  })
})

describe('refusals', () => {
  const few = (count: number) => made(TWO, 0.01, undefined, {}, TIMES_S.slice(0, count))
  it('fewer points than free parameters, with the count', () => {
    const found = fitCondition(few(3), { model: 'two' })
    expect('refused' in found && found.refused.message).toBe('Two exponentials have 4 free parameters here, and there are 3 points.')
    expect([refusedOf(fitCondition(few(1), { model: 'one' })), refusedOf(fitCondition(few(4), { model: 'two', freePlateau: true }))]).toEqual(['too-few-points', 'too-few-points'])
    expect(refusedOf(fitCondition(few(0), { model: 'one' }))).toBe('no-points')
  })
  it('repeats of one interval are not further intervals', () => {
    const repeated = conditionOf([1, 1, 1, 2, 2], [0.1, 0.2, 0.15, 0.3, 0.35], { sem: 0.01 })
    expect(refusedOf(fitCondition(repeated, { model: 'two' }))).toBe('too-few-points')
    expect(fitted(repeated, { model: 'one' }).points).toBe(5)
  })
  it('all ratios equal: flat', () => {
    const flat = fitCondition(conditionOf(TIMES_S, TIMES_S.map(() => 0.4), { sem: 0.01 }), { model: 'one' })
    expect('refused' in flat && flat.refused).toMatchObject({ code: 'flat', message: 'All 11 ratios are 0.4: the curve is flat and no time constant can be read from it.' })
  })
})

describe('warnings', () => {
  it('as many parameters as points: no freedom; unweighted then has neither errors nor a criterion', () => {
    const fit = fitted(made(TWO, 0.01, undefined, {}, [0.1, 1, 5, 40]), { model: 'two', weights: 'none' })
    expect(codesOf(fit)).toEqual(expect.arrayContaining(['no-freedom', 'no-criterion', 'few-intervals']))
    expect(fit.criterion).toBeNull()
    expect(fit.parameters.every(one => one.se === null && one.low === null && one.high === null)).toBe(true)
  })
  it('two exponentials of a curve that has one: not separable', () => {
    const codes = Array.from({ length: 5 }, (_, i) => codesOf(fitted(made(ONE, 0.01, streamOf(`single ${i}`)), { model: 'two' })))
    for (const one of codes) expect(one.includes('not-separable') || one.includes('at-bound')).toBe(true)
    expect(fitted(made(ONE, 0.01, streamOf('single 0')), { model: 'two' }).resolved).toBe(false)
    expect(codesOf(fitted(made(TWO, 0.01), { model: 'two' }))).toEqual(['one-curve'])
    expect(fitted(made(TWO, 0.01), { model: 'two' }).resolved).toBe(true)
  })
  it('no interval beyond the slow τ, and a τ outside the intervals', () => {
    expect(codesOf(fitted(made(TWO, 0.002, undefined, {}, TIMES_S.slice(0, 8)), { model: 'two' }))).toContain('slow-unsampled')
    const late = [1, 2, 4, 8, 16, 32, 64]
    expect(codesOf(fitted(made(TWO, 0.002, undefined, {}, late), { model: 'two' }))).toContain('tau-outside')
    expect(codesOf(fitted(made(ONE, 0.01), { model: 'one' }))).toEqual([])
  })
  it('a parameter on its bound is flagged and has no error', () => {
    const over = conditionOf(TIMES_S, recoveryCurve([{ name: 'depletion', value: 1.3 }, { name: 'tauS', value: 1 }], TIMES_S), { sem: 0.02 })
    const fit = fitted(over, { model: 'one' }), depletion = fit.parameters[0]!
    expect(depletion).toMatchObject({ name: 'depletion', value: 1, atBound: true, se: null, high: null })
    expect(depletion.low).toBeLessThan(1)
    expect(codesOf(fit)).toEqual(expect.arrayContaining(['at-bound', 'poor-fit']))
    expect(fit.warnings.find(one => one.code === 'at-bound')!.message).toMatch(/^depletion stands on a bound/)
  })
  it('an end that the data leave open is one-sided', () => {
    const fit = fitted(made([{ name: 'depletion', value: 0.98 }, { name: 'tauS', value: 1 }], 0.03), { model: 'one' })
    expect(fit.parameters[0]).toMatchObject({ atBound: false, high: null })
    expect(fit.parameters[0]!.low).toBeGreaterThan(0.8)
  })
})
