// Exponential and logarithm of our own: near the language's, exact where they must be, and frozen bit for bit.
import fc from 'fast-check'
import { expect, it } from 'vitest'
import { exp, expm1, log, log1p } from '../../../shared/fitting/elementary'

const near = (found: number, wanted: number, units: number) => found === wanted || Math.abs(found - wanted) <= units * Math.max(Math.abs(wanted) * 2 ** -52, 5e-324)

it('stays within a few units of the last place of the language\'s own', () => {
  fc.assert(fc.property(fc.double({ min: -740, max: 709, noNaN: true }), x => near(exp(x), Math.exp(x), 3)), { numRuns: 5000 })
  fc.assert(fc.property(fc.double({ min: -30, max: 30, noNaN: true }), x => near(expm1(x), Math.expm1(x), 4)), { numRuns: 5000 })
  fc.assert(fc.property(fc.double({ min: 5e-324, max: 1.7e308, noNaN: true }), x => near(log(x), Math.log(x), 4)), { numRuns: 5000 })
  fc.assert(fc.property(fc.double({ min: 0.5, max: 2, noNaN: true }), x => near(log(x), Math.log(x), 4)), { numRuns: 5000 })
  fc.assert(fc.property(fc.double({ min: -0.99, max: 1e6, noNaN: true }), x => near(log1p(x), Math.log1p(x), 4)), { numRuns: 5000 })
})
it('is right at the ends', () => {
  expect([exp(0), exp(-Infinity), exp(Infinity), exp(-800), exp(710), log(1), log(0), log(Infinity), expm1(0), log1p(0), expm1(-Infinity)]).toEqual([1, 0, Infinity, 0, Infinity, 0, -Infinity, Infinity, 0, 0, -1])
  expect([exp(NaN), log(NaN), log(-1)].every(Number.isNaN)).toBe(true)
  expect(log(2)).toBe(Math.LN2)
})
it('has these bits on every machine', () => {
  let hash = 2166136261
  const word = new Float64Array(1), halves = new Uint32Array(word.buffer)
  for (let i = 1; i <= 20_000; i++) {
    const x = i / 777 - 12
    for (const value of [exp(x), expm1(x / 3), log(i / 1234.5), log1p(i / 98765)]) {
      word[0] = value
      hash = Math.imul(Math.imul(hash ^ halves[0]!, 16777619) ^ halves[1]!, 16777619)
    }
  }
  expect((hash >>> 0).toString(16)).toBe('7c899ab6')
})
