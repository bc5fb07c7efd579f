/** Curves of the explanations against published solutions and an independent integration. */
import { describe, expect, it } from 'vitest'
import { CURVES } from '../../shared/fitting/weighing/curves'
import { expectRelative } from './support'

const ln = Math.log
function filled(name: keyof typeof CURVES, at: number[], times: number[]): number[] {
  const ratio = new Float64Array(times.length)
  CURVES[name](Float64Array.from([...at, 1]), Float64Array.from(times), ratio, null)
  return [...ratio]
}

/** Fourth-order Runge–Kutta (Kutta 1901) of dE/dt = −E(k₁S/S₀ + k₂), dS/dt = −E·k₁S/S₀. */
function stepped(k1: number, k2: number, s0: number, depletion: number, until: number, steps: number): number {
  let e = depletion, s = s0
  const h = until / steps, slope = (a: number, b: number): [number, number] => [-a * (k1 * b / s0 + k2), -a * k1 * b / s0]
  for (let i = 0; i < steps; i++) {
    const [a1, b1] = slope(e, s), [a2, b2] = slope(e + h * a1 / 2, s + h * b1 / 2), [a3, b3] = slope(e + h * a2 / 2, s + h * b2 / 2), [a4, b4] = slope(e + h * a3, s + h * b3)
    e += h * (a1 + 2 * a2 + 2 * a3 + a4) / 6
    s += h * (b1 + 2 * b2 + 2 * b3 + b4) / 6
  }
  return 1 - e
}

describe('curves of the explanations', () => {
  it('W-15 capture, then becoming ready: two reactions in series (Bateman 1910, Proc Camb Phil Soc 15:423)', () => {
    const expected = [0.021059072, 0.28295396, 0.59159104, 0.88075612]
    for (const at of [[ln(1.25), ln(4)], [ln(4), ln(1.25)]]) filled('two-step', at, [0.1, 0.5, 1, 2]).forEach((value, i) => expect(Math.abs(value - expected[i]!)).toBeLessThan(1e-8))
  })

  it('V-07 one kind of vesicle and a finite store: second-order kinetics n = SM(1 − E)/(M − SE), E = e^(−k(1 − S/M)t) (textbook solution of A + B → C)', () => {
    const times = [0.5, 1, 2, 4]
    expectRelative(filled('limited-store', [0, ln(1e-13), ln(4)], times).map(value => 100 * value), [37.758893, 59.828602, 82.276581, 96.218907], 2e-8)
    expectRelative(filled('limited-store', [0, ln(1e-13), 0], times).map(value => 100 * value), [33.3333333, 50, 66.6666667, 80], 1e-8)
  })

  it('V-06 in the limit of an ample poor kind: between the solution with both kinds finite and the one without any limit', () => {
    // 100 sites, 50 able vesicles (0.02/s each) and 1000 poor ones (0.001/s each): k₁ = 1, k₂ = 1, half an able vesicle per site.
    const times = [0.1, 0.25, 0.5, 1, 2, 4], both = [17.362329, 36.259770, 56.822279, 78.501619, 93.984255, 99.473460], ample = [18.126925, 39.346934, 63.212056, 86.466472, 98.168436, 99.966454]
    filled('limited-store', [0, 0, ln(0.5)], times).forEach((value, i) => {
      expect(100 * value).toBeGreaterThan(both[i]!)
      expect(100 * value).toBeLessThan(ample[i]!)
    })
  })

  it.each([[1.2, 0.05, 0.5, 0.88], [20, 0.01, 0.05, 0.9], [0.5, 0.05, 2, 0.35], [4, 0.2, 0.15, 1]])('a limited store k₁ %f, k₂ %f, s₀ %f, d %f equals a stepped integration', (k1, k2, s0, depletion) => {
    const times = [0.05, 0.4, 3.2, 25.6], ratio = new Float64Array(4)
    CURVES['limited-store'](Float64Array.from([ln(k1), ln(k2), ln(s0), depletion]), Float64Array.from(times), ratio, null)
    times.forEach((time, i) => expect(Math.abs(ratio[i]! - stepped(k1, k2, s0, depletion, time, 20_000))).toBeLessThan(1e-9))
  })

  it('a log-normal spread equals the mean over 200 001 rates by the midpoint rule on its quantile range', () => {
    for (const [sd, tolerance] of [[0.5, 2e-9], [1.5, 2e-9], [3, 1e-6]] as const) {
      const times = [0.05, 0.8, 12.8], n = 200_001, width = 16 / n, means = times.map(() => 0)
      for (let i = 0; i < n; i++) {
        const x = -8 + (i + 0.5) * width, weight = width * Math.exp(-x * x / 2) / Math.sqrt(2 * Math.PI)
        times.forEach((time, j) => {
          means[j]! += weight * Math.exp(-0.3 * Math.exp(sd * x) * time)
        })
      }
      filled('spread', [ln(0.3), sd * sd], times).forEach((value, j) => expect(Math.abs(1 - value - means[j]!)).toBeLessThan(tolerance))
    }
  })
})
