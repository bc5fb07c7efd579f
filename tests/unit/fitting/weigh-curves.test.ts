/** Derivatives of the explanations' curves against differences, and what the curves are at their edges. */
import { describe, expect, it } from 'vitest'
import { CURVES } from '../../../shared/fitting/weighing/curves'

const TIMES = Float64Array.from([0, ...Array.from({ length: 11 }, (_, i) => 0.05 * 2 ** i), 51.2])
const ln = Math.log
type Name = keyof typeof CURVES
const AT: [Name, number[], number][] = [
  ['one-kind', [ln(0.4), 0.88], 1e-9],
  ['site-kinds', [0.6, ln(1.2), ln(0.05), 0.88], 1e-9],
  ['site-kinds-uneven', [0.6, ln(1.2), ln(0.05), ln(1.7), 0.88], 1e-9],
  ['declining-drive', [ln(1.5), 0.05, ln(0.8), 0.88], 1e-8],
  ['two-step', [ln(0.3), ln(10), 0.88], 1e-9],
  ['two-step', [ln(5), ln(1), 0.35], 1e-9],
  ['two-step', [ln(1), ln(1.0001), 0.88], 1e-7],
  ['spread', [ln(0.3), 1, 0.88], 1e-9],
  ['spread', [ln(0.3), 1e-5, 0.88], 5e-6],
  ['limited-store', [ln(1.2), ln(0.05), ln(0.5), 0.88], 6e-8],
  ['limited-store', [ln(200), ln(1e-4), ln(0.05), 0.88], 1e-6],
  // Near the end of its recovery the empty part is lost among the digits of d.
  ['limited-store', [ln(0.6), ln(0.3), ln(3), 0.35], 2e-7],
]

function values(name: Name, at: number[]): Float64Array {
  const ratio = new Float64Array(TIMES.length)
  CURVES[name](Float64Array.from(at), TIMES, ratio, null)
  return ratio
}

describe('curves of the explanations', () => {
  it.each(AT)('%s at %j: derivatives are those of differences', (name, at, tolerance) => {
    const ratio = new Float64Array(TIMES.length), by = new Float64Array(TIMES.length * at.length)
    CURVES[name](Float64Array.from(at), TIMES, ratio, by)
    expect([...ratio]).toEqual([...values(name, at)])
    at.forEach((value, place) => {
      // Five points; a variance near 0 needs a step below itself.
      const h = name === 'spread' && place === 1 ? Math.min(1e-3, value / 4) : name === 'limited-store' ? 1e-3 : 2e-4
      const of = (steps: number) => values(name, at.map((one, i) => i === place ? one + steps * h : one))
      const [far, near, next, beyond] = [of(-2), of(-1), of(1), of(2)]
      TIMES.forEach((_, i) => {
        const difference = (far![i]! - 8 * near![i]! + 8 * next![i]! - beyond![i]!) / (12 * h)
        expect(Math.abs(by[i * at.length + place]! - difference), `${name}, place ${place}, point ${i}`).toBeLessThan(tolerance)
      })
    })
  })

  it.each(AT)('%s at %j: starts at 1 − d, never falls, ends below 1', (name, at) => {
    const ratio = values(name, at), depletion = at[at.length - 1]!
    expect(ratio[0]).toBeCloseTo(1 - depletion, 8)
    for (let i = 1; i < ratio.length; i++) expect(ratio[i]!).toBeGreaterThanOrEqual(ratio[i - 1]!)
    expect(ratio[ratio.length - 1]!).toBeLessThanOrEqual(1)
  })

  it('a spread without variance, a drive that does not decline and a store without end are one exponential', () => {
    const one = values('one-kind', [ln(0.4), 0.88])
    const close = (name: Name, at: number[], tolerance: number) => values(name, at).forEach((value, i) => expect(Math.abs(value - one[i]!), `${name} ${i}`).toBeLessThan(tolerance))
    close('spread', [ln(0.4), 0, 0.88], 1e-8)
    close('declining-drive', [ln(0.4), 1, ln(0.8), 0.88], 1e-14)
    close('limited-store', [ln(0.3), ln(0.1), ln(1e7), 0.88], 1e-6)
    close('two-step', [ln(0.4), ln(1e7), 0.88], 1e-6)
    close('site-kinds', [1, ln(0.4), ln(0.01), 0.88], 1e-14)
  })

  it('a limited store ends at times that its last digit cannot tell apart', () => {
    for (let k = 0; k < 400; k++) {
      const at = [ln(0.01 * 1.026 ** k), ln(1e-4 * 1.033 ** k), ln(0.02 * 1.0175 ** k), 0.3 + 0.0015 * k]
      for (const value of values('limited-store', at)) expect(value).toBeGreaterThan(0)
    }
  })
})
