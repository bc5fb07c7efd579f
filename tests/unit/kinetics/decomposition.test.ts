/** Three parts of τ, and the inverse problem. */
import { describe, expect, it } from 'vitest'
import { closedForm } from '../../../shared/kinetics/closed-form'
import { depletionPart, stillParts } from '../../../shared/kinetics/decomposition'
import { attachProbabilityFor, isolatedAttachProbabilityFor } from '../../../shared/kinetics/inverse'
import { scenarioWith } from './support'

describe('decomposition', () => {
  it('adds up to τ', () => {
    const parts = stillParts(scenarioWith(), 0.3)
    expect(parts.collisionS).toBeCloseTo(0.25, 12)
    expect(parts.failedHitsS).toBeCloseTo(0.25 * (1 / 0.3 - 1), 12)
    expect(depletionPart(parts, 1.1)! + parts.collisionS! + parts.failedHitsS!).toBeCloseTo(1.1, 12)
  })
  it('with two kinds of vesicle still sums to the closed form', () => {
    const scenario = scenarioWith({ vesicles: [{ name: 'able', share: 0.3, attachFactor: 0.5 }, { name: 'slow', share: 0.7, mobilityFactor: 0.1 }] })
    const parts = stillParts(scenario, 0.3)
    expect(parts.collisionS! + parts.failedHitsS!).toBeCloseTo(closedForm(scenario).classes[0]!.tauS!, 12)
    expect(parts.meanProbability).toBeCloseTo(0.3 * (0.3 * 0.5 + 0.07) / 0.37, 12)
  })
  it('is undefined where nothing attaches or moves', () => {
    expect(stillParts(scenarioWith(), 0).failedHitsS).toBeNull()
    expect(stillParts(scenarioWith({ vesicles: [{ name: 'stuck', share: 1, mobilityFactor: 0 }] }), 0.3).collisionS).toBeNull()
    expect(depletionPart(stillParts(scenarioWith(), 0), 1)).toBeNull()
  })
})

describe('inverse', () => {
  const bench = { diffusionUm2PerS: 0.1, densityPerUm3: 800, spacingNm: 50 }
  it('returns the probability that made τ', () => {
    expect(attachProbabilityFor({ ...bench, tauS: 1 / 1.2 })).toEqual({ kind: 'possible', probability: expect.closeTo(0.3, 12) })
    expect(attachProbabilityFor({ ...bench, tauS: 0.1 })).toMatchObject({ kind: 'too-fast', fastestTauS: 0.25 })
  })
  it('inverts the isolated site', () => {
    const g = 0.3387953531
    for (const s of [0.01, 0.3, 0.999]) {
      const tauS = (1 + g * s) / (4 * s)
      expect(isolatedAttachProbabilityFor({ ...bench, tauS }, g).probability).toBeCloseTo(s, 12)
    }
    expect(isolatedAttachProbabilityFor({ ...bench, tauS: 0.01 }, g)).toMatchObject({ kind: 'too-fast' })
  })
  it.each([0, -1, Number.NaN, Infinity])('refuses τ = %s', tauS => expect(() => attachProbabilityFor({ ...bench, tauS })).toThrow(RangeError))
})
