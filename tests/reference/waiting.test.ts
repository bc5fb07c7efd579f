/** Waiting, filling and noise, W-01 to W-15: standard results, digits computed independently. */
import { describe, expect, it } from 'vitest'
import { closedForm, closedFormFilled } from '../../shared/kinetics/closed-form'
import { volumeFraction } from '../../shared/kinetics/free-solution'
import { statesOfSite } from '../../shared/kinetics/site-course'
import * as waiting from '../../shared/kinetics/waiting'
import { ScenarioSchema, occupancyOf } from '../../shared/schemas/scenario'
import { Stream, seedWords, stateOf } from '../../shared/walk/streams'
import { expectRelative, expectWithin4Se } from './support'

const streamOf = (seed: string) => new Stream(stateOf(...seedWords(seed), 0))

function scenarioOf(diffusionUm2PerS: number, densityPerUm3: number, attachProbability: number) {
  return ScenarioSchema.parse({
    format: 'moorage-scenario', version: 1, title: 'Check', medium: { spacingNm: 45, diffusionUm2PerS, densityPerUm3, crowding: 'independent' },
    ribbon: { shape: 'plate', rows: 4, columns: 5, faces: 1, classLayout: 'rows' }, reservoir: { supply: 'stirred' },
    sites: [{ name: 'site', share: 1, attachProbability }], vesicles: [{ name: 'vesicle', share: 1 }], schedule: { durationS: 60, sampleEveryMs: 100 },
  })
}

describe('hits', () => {
  const probabilities = [0.001, 0.01, 0.1, 0.5]
  it('W-01 geometric number of hits until one attaches, and by a seeded draw', () => {
    const laws = probabilities.map(waiting.hitsUntilAttached)
    expectRelative(laws.map(law => law.mean), [1000, 100, 10, 2], 1e-12)
    expectRelative(laws.map(law => law.variance), [999000, 9900, 90, 2], 1e-12)
    expect(laws.map(law => law.median)).toEqual([693, 69, 7, 1])
    const stream = streamOf('hits'), draws = 20_000
    let hits = 0
    for (let i = 0; i < draws; i++) do hits++
    while (!stream.chance(0.1))
    expectWithin4Se(hits / draws, 10, Math.sqrt(90 / draws))
  })
  it('W-02 not attached after 100 hits', () => expectRelative(probabilities.map(s => waiting.unattachedAfter(s, 100)), [0.90479215, 0.36603234, 2.6561399e-5, 7.8886091e-31], 2e-8))
  it('W-03 probability and rate, by expm1 and log1p', () => {
    expectRelative([0.001, 0.01, 0.1, 1].map(x => waiting.probabilityWithin(x, 1)), [0.00099950017, 0.0099501663, 0.095162582, 0.63212056], 1e-8)
    expectRelative([0.001, 0.01, 0.1, 0.5].map(p => waiting.rateFrom(p, 1)), [0.0010005003, 0.010050336, 0.10536052, 0.69314718], 5e-8)
    expect(waiting.rateFrom(waiting.probabilityWithin(1e-17, 1), 1)).toBe(1e-17)
  })
})

describe('closed form', () => {
  const rows = (D: number, density: number, probabilities: number[]) => probabilities.map(s => closedForm(scenarioOf(D, density, s)).tauS!)
  it('W-04 hits and τ, D = 0.11; common practice, no source, and derivation', () => {
    expect(closedForm(scenarioOf(0.11, 2000, 1)).hitsPerS[0]).toBeCloseTo(9.9, 10)
    expectRelative(rows(0.11, 2000, [1, 0.1, 0.01]), [0.1010101, 1.010101, 10.10101], 2e-8)
  })
  it('W-05 the same, D = 0.015 (Holt et al. 2004 Curr Biol 14:173)', () => {
    expect(closedForm(scenarioOf(0.015, 2000, 1)).hitsPerS[0]).toBeCloseTo(1.35, 10)
    expectRelative(rows(0.015, 2000, [1, 0.1, 0.01]), [0.74074074, 7.4074074, 74.074074], 1e-8)
  })
  it('W-06 the same, D = 0.05', () => expectRelative(rows(0.05, 1000, [1, 0.1, 0.01]), [0.44444444, 4.4444444, 44.444444], 2e-8))
  it('W-06b the trade\'s textbook values, common practice, no source: 45 nm, 0.11 µm²/s, 2210 /µm³ give 91.4 ms', () => {
    const scenario = scenarioOf(0.11, 2210, 1)
    expectRelative([closedForm(scenario).tauS!, occupancyOf(scenario.medium)], [0.091411, 0.201386], 1e-5)
  })
  it('W-07 volume fraction and occupancy (geometry)', () => {
    expectRelative([volumeFraction(2000, 45), volumeFraction(500, 45)], [0.095425877, 0.023856469], 2e-8)
    expectRelative([2000, 500].map(density => occupancyOf({ spacingNm: 45, densityPerUm3: density })), [0.18225, 0.0455625], 1e-12)
  })
})

describe('filling', () => {
  it('W-08, W-09 first and last of N sites, Rényi 1953, and by a seeded stirred fill', () => {
    const laws = [7, 10, 20, 50, 110].map(waiting.firstAndLast)
    expectRelative(laws.map(law => law.lastMean), [2.5928571, 2.9289683, 3.5977397, 4.4992053, 5.2822346], 2e-8)
    expectRelative(laws.map(law => law.lastSd), [1.2295516, 1.2448967, 1.2633935, 1.2748069, 1.2790169], 5e-8)
    expectRelative(laws.map(law => law.lastMedian), [2.3615251, 2.7035552, 3.3795238, 4.2854594, 5.0701423], 2e-8)
    expect(waiting.firstAndLast(20).firstMean).toBe(0.05)
    const stream = streamOf('first and last'), runs = 2000, sites = 20, p = 0.002
    let first = 0, last = 0
    for (let run = 0; run < runs; run++) {
      let empty = sites, step = 0
      while (empty > 0) {
        step++
        for (let i = empty; i > 0; i--) if (stream.chance(p)) {
          if (empty === sites) first += step * p
          empty--
        }
        if (empty === 0) last += step * p
      }
    }
    expectWithin4Se(first / runs, 0.05, 0.05 / Math.sqrt(runs) + 0.001 / 4) // half a step of 0.002 τ is added to either side
    expectWithin4Se(last / runs, 3.5977397, 1.2633935 / Math.sqrt(runs))
  })
  it('W-10 half of the sites', () => expectRelative([10, 20, 50, 110].map(waiting.halfFilled), [0.64563492, 0.6687714, 0.68324716, 0.68862239], 2e-8))
  it('W-11 all filled', () => expectRelative([waiting.allFilled(20, 3)], [0.36009636], 1e-7))
  it('W-12 mean and noise of the number filled (binomial)', () => {
    const noise = [0.1, 0.5, Math.LN2, 1, 2, 3].map(t => waiting.filledNoise([{ sites: 20, filled: -Math.expm1(-t) }]))
    expectRelative(noise.map(one => one.mean), [1.9032516, 7.8693868, 10, 12.642411, 17.293294, 19.004259], 5e-8)
    expectRelative(noise.map(one => one.sd), [1.3123008, 2.1847252, 2.236068, 2.1565906, 1.5298343, 0.97271081], 5e-8)
    const tau = closedForm(scenarioOf(0.11, 2000, 0.1)).tauS!
    expectRelative(closedFormFilled(scenarioOf(0.11, 2000, 0.1), [0.1 * tau, tau, 3 * tau]).filled[0]!, [1.9032516, 12.642411, 19.004259], 5e-8)
  })
  it('W-13 covariance of two times of one run', () => {
    const { covariance, correlation } = waiting.filledCovariance(20, -Math.expm1(-0.5), -Math.expm1(-1))
    expectRelative([covariance, correlation], [2.8949856, 0.61444338], 2e-8)
  })
  it('W-14 reversible attachment, and the closed form\'s curve settles there', () => {
    const { occupancy, tauS } = waiting.reversible(1, 0.1)
    expectRelative([occupancy, tauS], [0.90909091, 0.90909091], 2e-8)
    const course = { initialFill: 0, releases: [], decline: null }
    expect(statesOfSite({ attachPerS: 1, detachPerS: 0.1, readyPerS: null }, course, [60])[0]!.filled).toBeCloseTo(occupancy, 12)
  })
  it('W-15 capture, then becoming ready: a sigmoid start', () => {
    const course = { initialFill: 0, releases: [], decline: null }
    const states = statesOfSite({ attachPerS: 1.25, detachPerS: 0, readyPerS: 4 }, course, [0.1, 0.5, 1, 2])
    expectRelative(states.map(state => state.ready), [0.021059072, 0.28295396, 0.59159104, 0.88075612], 5e-8)
  })
})
