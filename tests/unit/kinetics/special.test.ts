/** Error functions against 30-digit values (computed with arbitrary-precision arithmetic) and their own identities. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { erf, erfc, erfcx } from '../../../shared/kinetics/special'

const VALUES: [number, number, number][] = [
  [0.001, 0.99887162120903076362, 0.99887262008115140863], [0.1, 0.8875370839817151078, 0.89645697996912664193],
  [0.5, 0.47950012218695346232, 0.61569034419292587487], [0.99, 0.16149193044463019642, 0.43033121306414826923],
  [1, 0.15729920705028513066, 0.42758357615580700441], [1.01, 0.15318950377172330211, 0.42486681431119998608],
  [1.5, 0.033894853524689272933, 0.32158541645431750235], [2, 0.0046777349810472658379, 0.25539567631050574387],
  [3, 0.000022090496998585441373, 0.17900115118138995042], [5, 1.5374597944280348502e-12, 0.11070463773306862637],
  [10, 2.088487583762544757e-45, 0.056140992743822585858], [20, 5.3958656116079009289e-176, 0.028174348741051319319],
  [26, 5.6631924088561428465e-296, 0.021683584850562906616], [-0.5, 1.5204998778130465377, 1.9523604891825570933],
  [-2, 1.9953222650189527342, 108.94090438997797241], [-5, 1.9999999999984625402, 144009798674.66104041],
]

describe('error functions', () => {
  it.each(VALUES)('at %s', (x, complement, scaled) => {
    expect(Math.abs(erfc(x) / complement - 1)).toBeLessThan(1e-12)
    expect(Math.abs(erfcx(x) / scaled - 1)).toBeLessThan(1e-12)
  })
  it('keep digits of erfcx where erfc is gone', () => {
    expect(erfc(30)).toBe(0)
    expect(Math.abs(erfcx(30) / 0.018795888861416751497 - 1)).toBeLessThan(1e-13)
    expect(Math.abs(erfcx(100) / 0.0056416137829894329036 - 1)).toBeLessThan(1e-13)
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
