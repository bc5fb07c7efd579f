/** Fits against worked values that another least-squares program computed, and against exact laws. */
import { describe, expect, it } from 'vitest'
import { fitCondition, searchConditions, type RecoveryFit } from '../../shared/fitting/fit'
import { fitLeastSquares, covarianceOf } from '../../shared/fitting/least-squares'
import { nestedF, scatterCriteria } from '../../shared/fitting/criteria'
import type { FitOptions } from '../../shared/fitting/fit-design'
import { recoveryCurve } from '../../shared/fitting/recovery-model'
import { conditionOf, CONTROL, WORKED, WORKED_TIMES_S } from './recovery-data'
import { expectRelative } from './support'

const fitted = (options: FitOptions, condition = WORKED): RecoveryFit => {
  const fit = fitCondition(condition, options)
  if ('refused' in fit) throw new Error(fit.refused.message)
  return fit
}
const values = (fit: RecoveryFit) => fit.parameters.map(one => one.value)
const errors = (fit: RecoveryFit) => fit.parameters.map(one => one.se!)
const plain = { weights: 'none', depletion: 'complete' } as const

describe('invented set of nine points, unweighted, values of an independent program (Python, SciPy)', () => {
  it('T-12 one exponential', () => {
    const fit = fitted({ model: 'one', ...plain })
    expectRelative([...values(fit), fit.chi2, fit.criterion!], [2.23173074, 0.09009861766, -35.436675], 1e-7)
    expectRelative(errors(fit), [0.39473], 2e-5)
    const { aic, bic } = scatterCriteria(9, fit.chi2, 2)
    expectRelative([aic, bic], [-37.436675, -37.042226], 1e-7)
  })
  it('T-13 one exponential with a free plateau', () => {
    const fit = fitted({ model: 'one', ...plain, freePlateau: true })
    expect(fit.parameters.map(one => one.name)).toEqual(['tauS', 'plateau'])
    expectRelative([...values(fit), fit.chi2, fit.criterion!], [1.39650892, 0.83923685, 0.02699588043, -41.483660], 1e-7)
    expectRelative(errors(fit), [0.20891, 0.035358], 2e-5)
    const { aic, bic } = scatterCriteria(9, fit.chi2, 3)
    expectRelative([aic, bic], [-46.283660, -45.691986], 1e-7)
  })
  it('T-14 two exponentials, with their covariances', () => {
    const fit = fitted({ model: 'two', ...plain })
    expectRelative([...values(fit), fit.chi2, fit.criterion!], [0.60310904, 0.81083173, 13.0583744, 5.872698610e-4, -68.735256], 2e-7)
    expectRelative(errors(fit), [0.017248, 0.040665, 1.00397], 2e-5)
    const covariance = (i: number, j: number) => fit.correlations[i]![j]! * fit.parameters[i]!.se! * fit.parameters[j]!.se!
    expectRelative([covariance(0, 1), covariance(0, 2), covariance(1, 2)], [5.800581e-4, 0.01436449, 0.02515404], 1e-5)
    const { aic, bic } = scatterCriteria(9, fit.chi2, 4)
    expectRelative([aic, bic], [-78.735256, -77.946358], 1e-7)
  })
  it('T-17 nested F of the two', () => {
    const [one, two] = (['one', 'two'] as const).map(model => fitted({ model, ...plain }))
    expectRelative([nestedF({ rss: one!.chi2, parameters: 1 }, { rss: two!.chi2, parameters: 3 }, 9).f], [457.25834], 1e-6)
  })
  it('T-18 errors of derived quantities by the gradient: mean time constant and both rates', () => {
    const fit = fitted({ model: 'two', ...plain }), [share, fast, slow] = values(fit) as [number, number, number]
    const spread = (gradient: number[]) => Math.sqrt(gradient.reduce((sum, a, i) => sum + gradient.reduce((row, b, j) => row + a * b * fit.correlations[i]![j]! * errors(fit)[i]! * errors(fit)[j]!, 0), 0))
    expectRelative([share * fast + (1 - share) * slow, spread([fast - slow, share, 1 - share])], [5.6717706, 0.26043], 2e-5)
    expectRelative([1 / fast, spread([0, 1 / fast ** 2, 0]), 1 / slow, spread([0, 0, 1 / slow ** 2])], [1.2333015, 0.061853, 0.076579210, 0.0058876], 2e-5)
  })
  it('T-33 precision that a design promises (Cramér–Rao): A 0.6, τ 0.8 and 13 s, σ = 0.05/√6', () => {
    const truth = [{ name: 'fastShare', value: 0.6 }, { name: 'tauFastS', value: 0.8 }, { name: 'tauSlowS', value: 13 }] as const
    const exact = conditionOf(WORKED_TIMES_S, recoveryCurve(truth, WORKED_TIMES_S), { sem: 0.05 / Math.sqrt(6) })
    const fit = fitted({ model: 'two', depletion: 'complete' }, exact)
    expectRelative(values(fit), [0.6, 0.8, 13], 1e-9)
    expectRelative(errors(fit), [0.03533, 0.08295, 2.0386], 1e-4)
  })
})

/** A straight line as a problem of the same engine. */
const line = (columns: ((x: number) => number)[]) => fitLeastSquares({
  points: 3, parameters: columns.length,
  evaluate(at, residuals, jacobian) {
    [[1, 1.1, 0.1], [2, 1.9, 0.2], [3, 3.2, 0.3]].forEach(([x, y, sigma], i) => {
      residuals[i] = (columns.reduce((sum, column, j) => sum + at[j]! * column(x!), 0) - y!) / sigma!
      columns.forEach((column, j) => {
        if (jacobian) jacobian[i * columns.length + j] = column(x!) / sigma!
      })
    })
    return true
  },
}, columns.map(() => 0))

describe('weighted lines, closed form', () => {
  it('T-27 through the origin', () => {
    const fit = line([x => x])
    expectRelative([fit.parameters[0]!, Math.sqrt(covarianceOf(fit)![0]!), fit.chi2], [1.0388889, 0.057735027, 1.2407407], 5e-8)
  })
  it('T-28 with intercept', () => {
    const fit = line([() => 1, x => x]), covariance = covarianceOf(fit)!
    expectRelative([...fit.parameters, Math.sqrt(covariance[0]!), Math.sqrt(covariance[3]!), fit.chi2], [0.10769231, 0.97307692, 0.20380987, 0.13728129, 0.96153846], 5e-8)
  })
})

describe('demo bench, control (invented)', () => {
  it('χ² of one and of two exponentials with the SD pooled over all conditions, 0.03328, as another program found it: 679.3 (9) and 3.2 (7)', () => {
    const [one, two] = (['one', 'two'] as const).map(model => fitted({ model, weights: 'pooled', pooledSd: 0.03328 }, CONTROL))
    expect(Math.abs(one!.chi2 - 679.3)).toBeLessThan(0.3)
    expect(Math.abs(two!.chi2 - 3.2)).toBeLessThan(0.05)
    expect([one!.dof, two!.dof]).toEqual([9, 7])
  })
  it('finds the same minimum from every start', () => {
    const searched = searchConditions([CONTROL], { model: 'two' })
    if ('refused' in searched) throw new Error(searched.refused.message)
    const again = fitLeastSquares(searched.found.problem, [0.8, 0.3, Math.log(0.2), Math.log(5)])
    expect(again.chi2).toBeCloseTo(searched.found.chi2, 6)
  })
})
