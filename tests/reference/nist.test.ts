/** The least-squares engine against certified values: NIST StRD, nonlinear regression, eleven sets from both starts. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { CERTIFIED, covarianceOf, fitLeastSquares } from '../../shared/fitting/least-squares'
import { NIST_SETS, type NistSet } from './nist-sets'

const pointsOf = (name: string) => readFileSync(new URL(`../fixtures/nist/${name}.csv`, import.meta.url), 'utf8').trim().split('\n')
  .map(line => line.split(',').map(Number)).filter(row => row.every(Number.isFinite)).map(([y, x]) => ({ y: y!, x: x! }))

/** Log relative error: how many digits agree, at most 11, the number certified. */
const digits = (found: number, certified: number) => Math.min(11, found === certified ? 11 : -Math.log10(Math.abs(found / certified - 1)))
const fewest = (found: ArrayLike<number>, certified: number[]) => Math.min(...certified.map((value, i) => digits(found[i]!, value)))

function certifiedFit({ name, model }: NistSet, start: number[]) {
  const data = pointsOf(name), n = start.length, row = new Float64Array(n)
  const fit = fitLeastSquares({
    points: data.length, parameters: n,
    evaluate(at, residuals, jacobian) {
      for (const [i, { y, x }] of data.entries()) {
        residuals[i] = model(at, x, jacobian && row) - y
        if (!Number.isFinite(residuals[i]!)) return false
        jacobian?.set(row, i * n)
      }
      return true
    },
  }, start, CERTIFIED)
  const covariance = covarianceOf(fit), variance = fit.chi2 / (data.length - n)
  const standardErrors = Array.from({ length: n }, (_, j) => Math.sqrt(variance * covariance![j * n + j]!))
  return { ...fit, standardErrors, points: data.length }
}

/** One order for sums of exponentials, which have no order of their own (Lanczos: by rate). */
function ordered(values: ArrayLike<number>, rates: ArrayLike<number>): number[] {
  return [0, 2, 4].sort((a, b) => rates[a + 1]! - rates[b + 1]!).flatMap(k => [values[k]!, values[k + 1]!])
}

describe('NIST StRD: six digits or more of parameters, standard errors and residual sum of squares', () => {
  it.each(NIST_SETS.flatMap(set => [1, 2].map(start => ({ set, start, name: set.name }))))('$name, start $start', ({ set, start }) => {
    const fit = certifiedFit(set, set.starts[start - 1]!), sums = set.name.startsWith('Lanczos')
    const inOrder = (values: ArrayLike<number>) => sums ? ordered(values, fit.parameters) : values
    const reached = { parameters: fewest(inOrder(fit.parameters), set.certified), errors: fewest(inOrder(fit.standardErrors), set.standardErrors), rss: digits(fit.chi2, set.rss) }
    if (process.env.NIST_TABLE) process.stdout.write(`${set.name} ${start}: ${Object.values(reached).map(value => value.toFixed(1)).join(' / ')} (${fit.iterations})\n`)
    expect(fit.converged).toBe(true)
    expect(reached.parameters).toBeGreaterThanOrEqual(6)
    // The residuals of Lanczos1 are its data's last digit: NIST certifies them in 128 bits, double precision holds only their size.
    if (set.name === 'Lanczos1') return expect(fit.chi2).toBeLessThan(1e-20)
    expect(reached.errors).toBeGreaterThanOrEqual(6)
    expect(reached.rss).toBeGreaterThanOrEqual(6)
  })
})
