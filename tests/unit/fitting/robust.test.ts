/** Fits of whatever comes: nothing throws, nothing is NaN, intervals hold their values, and the minimum is the one that many random starts find. */
import { describe, expect, it } from 'vitest'
import { fitCondition, searchConditions } from '../../../shared/fitting/fit'
import { fitLeastSquares, SEARCH } from '../../../shared/fitting/least-squares'
import { WEIGHTS } from '../../../shared/fitting/point-errors'
import { conditionOf } from '../../reference/recovery-data'
import { accepted, made, streamOf } from './support'

const uniformOf = (seed: string) => {
  const stream = streamOf(seed)
  return { stream, uniform: () => stream.next() / 2 ** 32 }
}

describe('300 odd recordings: noise, steps, single points, intervals of 0 and from 1 ms to 100 s', () => {
  const { uniform } = uniformOf('odd')
  const shapes = [() => uniform(), (x: number) => 0.98 - 0.8 * Math.exp(-x) + 0.1 * (uniform() - 0.5), () => uniform() < 0.5 ? 0 : 1, (x: number) => x < 0.3 ? 0.1 : 0.9, () => 1e-9 * uniform()]
  const sets = Array.from({ length: 300 }, () => {
    const times = Array.from({ length: 1 + Math.floor(14 * uniform()) }, () => 10 ** (5 * uniform() - 3)), shape = shapes[Math.floor(uniform() * shapes.length)]!, scale = 10 ** (4 * uniform() - 2)
    if (uniform() < 0.1) times[0] = 0
    return conditionOf(times, times.map(time => shape(time / scale)), { sem: 10 ** (-3 * uniform()), n: 5, sd: 0.1 })
  })
  it.each(['one', 'two'] as const)('%s', (model) => {
    for (const [i, condition] of sets.entries()) {
      const fit = fitCondition(condition, { model, weights: WEIGHTS[i % 3], freePlateau: i % 2 === 0 })
      if ('refused' in fit) {
        expect(fit.refused.message).toMatch(/\.$/)
        continue
      }
      expect(JSON.stringify(fit, (_, value: unknown) => typeof value === 'number' && !Number.isFinite(value) ? 'not finite' : value)).not.toContain('not finite')
      for (const { value, low, high } of fit.parameters) {
        if (low !== null) expect(low).toBeLessThanOrEqual(value * (1 + 1e-9))
        if (high !== null) expect(high).toBeGreaterThanOrEqual(value * (1 - 1e-9))
      }
      // Two that coincide may be in either order in their last digits.
      if (model === 'two') expect(fit.parameters.find(one => one.name === 'tauFastS')!.value).toBeLessThanOrEqual(fit.parameters.find(one => one.name === 'tauSlowS')!.value * (1 + 1e-5))
    }
  })
})

it('finds what 30 random starts find, for 60 truths of every share and distance (invented)', () => {
  const { stream, uniform } = uniformOf('starts')
  for (let i = 0; i < 60; i++) {
    const fast = 10 ** (2.5 * uniform() - 1.5), slow = fast * 10 ** (0.3 + 1.5 * uniform())
    const condition = made([{ name: 'depletion', value: 0.3 + 0.6 * uniform() }, { name: 'fastShare', value: 0.1 + 0.8 * uniform() }, { name: 'tauFastS', value: fast }, { name: 'tauSlowS', value: slow }], 0.012, stream)
    const { found } = accepted(searchConditions([condition], { model: 'two' })), { lower, upper } = found.problem
    const random = Array.from({ length: 30 }, () => fitLeastSquares(found.problem, lower!.map((low, j) => low + (upper![j]! - low) * uniform()), { ...SEARCH, iterations: 400 }).chi2)
    expect(found.chi2).toBeLessThan(Math.min(...random) + 0.05)
  }
})
