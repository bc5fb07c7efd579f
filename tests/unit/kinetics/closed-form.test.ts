/** The closed form: rates, counts, and the expected curve against independent numerical integration. */
import { describe, expect, it } from 'vitest'
import { closedForm, closedFormFilled } from '../../../shared/kinetics/closed-form'
import { realisedCounts } from '../../../shared/kinetics/realised-counts'
import { statesOfSite } from '../../../shared/kinetics/site-course'
import { stepSeconds } from '../../../shared/schemas/scenario'
import { scenarioWith } from './support'

const times = [0, 0.01, 0.1, 0.5, 1, 2, 5, 10, 30]

/** Classical Runge–Kutta of the three-state site, small steps: an independent way to the same curve. */
function integrate(k: number, d: number, r: number, decline: { restFactor: number, timeConstantS: number } | null, start: number, endS: number, steps: number) {
  const slope = (t: number, [f, q]: [number, number]): [number, number] => {
    const g = decline ? decline.restFactor + (1 - decline.restFactor) * Math.exp(-t / decline.timeConstantS) : 1
    return [k * g * (1 - f) - d * f, r * (f - q) - d * q]
  }
  let y: [number, number] = [start, start]
  const h = endS / steps
  const at = (a: [number, number], b: [number, number], c: number): [number, number] => [a[0] + c * b[0], a[1] + c * b[1]]
  for (let i = 0; i < steps; i++) {
    const t = i * h
    const k1 = slope(t, y), k2 = slope(t + h / 2, at(y, k1, h / 2)), k3 = slope(t + h / 2, at(y, k2, h / 2)), k4 = slope(t + h, at(y, k3, h))
    y = [y[0] + h / 6 * (k1[0] + 2 * k2[0] + 2 * k3[0] + k4[0]), y[1] + h / 6 * (k1[1] + 2 * k2[1] + 2 * k3[1] + k4[1])]
  }
  return { filled: y[0], ready: y[1] }
}

describe('realisedCounts', () => {
  it('shares out by largest remainder', () => {
    expect(realisedCounts([0.6, 0.4], 48)).toEqual([29, 19])
    expect(realisedCounts([0.5, 0.5], 7)).toEqual([4, 3])
    expect(realisedCounts([0.005, 0.995], 24)).toEqual([0, 24])
    expect(realisedCounts([0.1, 0.2, 0.7], 10)).toEqual([1, 2, 7])
    expect(realisedCounts([1], 0)).toEqual([0])
  })
  it('always sums to the total', () => {
    for (let total = 0; total < 200; total++) for (const share of [0.1, 0.25, 1 / 3, 0.6, 0.95])
      expect(realisedCounts([share, 1 - share], total).reduce((a, b) => a + b)).toBe(total)
  })
  it.each([-1, 2.5, Number.NaN])('refuses %s things', total => expect(() => realisedCounts([1], total)).toThrow(RangeError))
})

describe('closedForm', () => {
  it('gives D·ρ·a hits and τ = 1/(D·ρ·a·s) per kind of site', () => {
    const form = closedForm(scenarioWith())
    expect(form.hitsPerS[0]).toBeCloseTo(4, 12)
    expect(form.classes.map(one => one.sites)).toEqual([29, 19])
    expect(form.classes[0]!.tauS).toBeCloseTo(1 / 1.2, 12)
    expect(form.classes[1]!.tauS).toBeCloseTo(20, 12)
    expect(form.tauS).toBeCloseTo((29 / 1.2 + 19 * 20) / 48, 12)
  })
  it('sums over kinds of vesicle with mobility and factor', () => {
    const form = closedForm(scenarioWith({ vesicles: [{ name: 'able', share: 0.25, attachFactor: 0.5 }, { name: 'slow', share: 0.75, mobilityFactor: 0.2 }] }))
    expect(form.hitsPerS[0]).toBeCloseTo(1, 12)
    expect(form.hitsPerS[1]).toBeCloseTo(0.6, 12)
    expect(form.classes[0]!.ratePerS).toBeCloseTo(0.3 * (0.5 + 0.6), 12)
  })
  it('has no τ under decline or at probability 0, but leaves out a kind rounded to no site', () => {
    expect(closedForm(scenarioWith({ schedule: { decline: { restFactor: 0.1, timeConstantS: 1.5 } } })).tauS).toBeNull()
    const never = closedForm(scenarioWith({ sites: [{ name: 'a', share: 0.5, attachProbability: 0.3 }, { name: 'b', share: 0.5, attachProbability: 0 }] }))
    expect(never.classes.map(one => one.tauS === null)).toEqual([false, true])
    expect(never.tauS).toBeNull()
    const gone = closedForm(scenarioWith({ sites: [{ name: 'a', share: 0.995, attachProbability: 0.3 }, { name: 'b', share: 0.005, attachProbability: 0 }] }))
    expect(gone.tauS).toBeCloseTo(1 / 1.2, 12)
  })
})

describe('closedFormFilled', () => {
  it('is the two-exponential sum without further effects', () => {
    const { filled, ready } = closedFormFilled(scenarioWith({ schedule: { initialFill: 0.12 } }), times)
    expect(ready).toBeNull()
    times.forEach((t, i) => {
      expect(filled[0]![i]).toBeCloseTo(29 * (1 - 0.88 * Math.exp(-1.2 * t)), 10)
      expect(filled[1]![i]).toBeCloseTo(19 * (1 - 0.88 * Math.exp(-0.05 * t)), 10)
    })
  })
  it('is exp(−k∫g) under decline alone', () => {
    const { filled } = closedFormFilled(scenarioWith({ schedule: { decline: { restFactor: 0.1, timeConstantS: 1.5 } } }), times)
    times.forEach((t, i) => {
      const integral = 0.1 * t + 0.9 * 1.5 * (1 - Math.exp(-t / 1.5))
      expect(filled[0]![i]).toBeCloseTo(29 * (1 - Math.exp(-1.2 * integral)), 10)
    })
  })
  it.each([
    [1.2, 0.3, 5, null], [1.2, 0, 1.2, null], [4, 0.5, 3.5, null],
    [1.2, 0.3, 5, { restFactor: 0.1, timeConstantS: 1.5 }], [3, 0, 1, { restFactor: 0, timeConstantS: 0.2 }], [8, 2, 6, { restFactor: 0.3, timeConstantS: 0.7 }],
    [800, 300, 500, { restFactor: 0.1, timeConstantS: 0.5 }], [800, 300, 5, { restFactor: 0, timeConstantS: 2 }],
  ])('agrees with a Runge–Kutta integration: attach %s, detach %s, ready %s, decline %o', (k, d, r, decline) => {
    const course = { initialFill: 0.12, releases: [], decline }
    for (const end of [0.05, 0.4, 2.5, 9]) {
      const mine = statesOfSite({ attachPerS: k, detachPerS: d, readyPerS: r }, course, [end])[0]!
      const other = integrate(k, d, r, decline, 0.12, end, 20_000)
      expect(Math.abs(mine.filled - other.filled)).toBeLessThan(decline ? 2e-5 : 1e-9)
      expect(Math.abs(mine.ready - other.ready)).toBeLessThan(decline ? 2e-5 : 1e-9)
    }
  })
  it('empties a fraction at a release, reads before it at its own time, and restarts the decline', () => {
    const scenario = scenarioWith({ schedule: { durationS: 60, sampleEveryMs: 20, releases: [{ atMs: 2000, fraction: 0.5 }], decline: { restFactor: 0.1, timeConstantS: 1.5 } } })
    const { filled } = closedFormFilled(scenario, [480 * stepSeconds(scenario.medium), 2.0000001, 3])
    expect(filled[0]![1]! / filled[0]![0]!).toBeCloseTo(0.5, 5)
    const empty = (29 - filled[0]![0]! / 2) / 29
    expect(filled[0]![2]).toBeCloseTo(29 * (1 - empty * Math.exp(-1.2 * (0.1 + 1.35 * (1 - Math.exp(-1 / 1.5))))), 8)
  })
  it('reads every release at its step as the walk does: the sample of that step still shows what was before', () => {
    for (let atMs = 1000; atMs < 1030; atMs++) {
      const scenario = scenarioWith({ schedule: { releases: [{ atMs, fraction: 1 }] } }), stepS = stepSeconds(scenario.medium)
      const step = Math.round(atMs / 1000 / stepS)
      const { filled } = closedFormFilled(scenario, [step * stepS, (step + 1) * stepS])
      expect(filled[0]![0]).toBeGreaterThan(15)
      expect(filled[0]![1]).toBeLessThan(0.2)
    }
  })
  it('stays finite and within the sites at extreme rates', () => {
    for (const [k, d, r] of [[1e8, 1e4, 1e4], [1e-12, 0, 1e-6], [0, 0, 1], [0, 1e4, null], [1e5, 0, 1e4]] as const)
      for (const decline of [null, { restFactor: 0, timeConstantS: 1e-6 }, { restFactor: 0.5, timeConstantS: 3600 }]) {
        for (const state of statesOfSite({ attachPerS: k, detachPerS: d, readyPerS: r }, { initialFill: 0.5, releases: [{ atS: 1, fraction: 1 }], decline }, [0, 1e-9, 1, 10, 3600])) {
          expect(state.filled).toBeGreaterThanOrEqual(-1e-12)
          expect(state.filled).toBeLessThanOrEqual(1 + 1e-12)
          expect(state.ready).toBeLessThanOrEqual(state.filled)
        }
      }
  })
  it('refuses times that run back', () => expect(() => closedFormFilled(scenarioWith(), [1, 0.5])).toThrow(RangeError))
})
