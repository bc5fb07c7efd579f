/** Error functions against 30-digit values (computed with arbitrary-precision arithmetic) and their own identities. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { erf, erfc, erfcx } from '../../../shared/kinetics/special'

const VALUES: [number, number, number][] = [
  [0.001, 0.9988716212090307, 0.9988726200811514], [0.1, 0.8875370839817152, 0.8964569799691267],
  [0.5, 0.4795001221869535, 0.6156903441929259], [0.99, 0.1614919304446302, 0.4303312130641483],
  [1, 0.15729920705028513, 0.427583576155807], [1.01, 0.1531895037717233, 0.4248668143112],
  [1.5, 0.033894853524689274, 0.3215854164543175], [2, 0.004677734981047266, 0.25539567631050575],
  [3, 2.209049699858544e-05, 0.17900115118138996], [5, 1.537459794428035e-12, 0.11070463773306863],
  [10, 2.088487583762545e-45, 0.05614099274382259], [20, 5.395865611607901e-176, 0.02817434874105132],
  [26, 5.663192408856143e-296, 0.021683584850562907], [-0.5, 1.5204998778130465, 1.952360489182557],
  [-2, 1.9953222650189528, 108.94090438997797], [-5, 1.9999999999984626, 144009798674.661],
]

describe('error functions', () => {
  it.each(VALUES)('at %s', (x, complement, scaled) => {
    expect(Math.abs(erfc(x) / complement - 1)).toBeLessThan(1e-12)
    expect(Math.abs(erfcx(x) / scaled - 1)).toBeLessThan(1e-12)
  })
  it('keep digits of erfcx where erfc is gone', () => {
    expect(erfc(30)).toBe(0)
    expect(Math.abs(erfcx(30) / 0.01879588886141675 - 1)).toBeLessThan(1e-13)
    expect(Math.abs(erfcx(100) / 0.005641613782989433 - 1)).toBeLessThan(1e-13)
    expect(erfcx(1e200)).toBeCloseTo(0, 12)
  })
  it('agree with each other and across the change of method', () => {
    fc.assert(fc.property(fc.double({ min: -5, max: 5, noNaN: true }), (x) => {
      expect(Math.abs(erf(x) + erfc(x) - 1)).toBeLessThan(1e-14)
      expect(Math.abs(erf(-x) + erf(x))).toBeLessThan(1e-15)
      expect(Math.abs(erfcx(x) / (Math.exp(x * x) * erfc(x)) - 1)).toBeLessThan(1e-11)
    }))
    for (const x of [1 - 1e-9, 1, 1 + 1e-9]) expect(Math.abs(erfc(x) - (0.15729920705028513 - (x - 1) * 0.41510749742059466))).toBeLessThan(1e-15)
  })
  it('keep the small ends', () => {
    expect(erf(1e-300)).toBeCloseTo(1e-300 * 2 / Math.sqrt(Math.PI), 310)
    expect(erf(0)).toBe(0)
    expect(erfc(-40)).toBe(2)
  })
})
