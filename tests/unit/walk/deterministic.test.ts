/** Elementary functions made of + − × / alone agree with the engine's own to rounding. */
import { expect, it } from 'vitest'
import { chanceWithin, decayOver } from '../../../shared/walk/deterministic'

const arguments_ = [1e-300, 1e-12, 1e-6, 0.001, 0.1, 0.125, 0.1250001, 0.7, 1, 3, 10, 36, 63.9]

it.each(arguments_)('1 − e^(−%s)', x => expect(chanceWithin(x) / -Math.expm1(-x)).toBeCloseTo(1, 13))
it.each(arguments_)('e^(−%s)', x => expect(decayOver(x) / Math.exp(-x)).toBeCloseTo(1, 12))
// W-03: p = 1 − e^(−Δt/τ) at Δt/τ = 0.001, 0.01, 0.1, 1 (standard).
it.each([[0.001, 0.00099950017], [0.01, 0.0099501663], [0.1, 0.095162582], [1, 0.63212056]])('chance of a rate × duration of %s is %s', (x, p) =>
  expect(chanceWithin(x)).toBeCloseTo(p, 8))
it('knows its ends', () => {
  expect([chanceWithin(0), chanceWithin(65), chanceWithin(Infinity)]).toEqual([0, 1, 1])
  expect([decayOver(0), decayOver(746), decayOver(Infinity)]).toEqual([1, 0, 0])
})
it.each([-1, Number.NaN])('refuses %s', (x) => {
  expect(() => chanceWithin(x)).toThrow(RangeError)
  expect(() => decayOver(x)).toThrow(RangeError)
})
