/** Digests: the worked example that the developers' page prints, and what a digest must and must not depend on. */
import { describe, expect, it } from 'vitest'
import { ScenarioSchema } from '../../../shared/schemas/scenario'
import { canonicalText } from '../../../shared/walk/canonical'
import { blockDigest, digestedScenario, outcomeDigest, scenarioDigest } from '../../../shared/walk/digest'
import { CONTROL } from '../../fixtures/control'

const control = ScenarioSchema.parse(CONTROL)

describe('scenario digest', () => {
  it('worked example: document, canonical text, digest', () => {
    expect(canonicalText(digestedScenario(control))).toBe('{"format":"moorage-scenario","medium":{"crowding":"independent","densityPerUm3":800,"diffusionUm2PerS":0.1,"spacingNm":50},"reservoir":{"marginSites":12,"supply":"held"},"ribbon":{"classLayout":"interleaved","columns":6,"count":12,"faces":2,"rows":4,"shape":"plate"},"schedule":{"decline":null,"durationS":60,"initialFill":0.12,"releases":[],"sampleEveryMs":20},"sites":[{"attachProbability":0.3,"detachPerS":0,"readyPerS":null,"share":0.6},{"attachProbability":0.0125,"detachPerS":0,"readyPerS":null,"share":0.4}],"version":1,"vesicles":[{"attachFactor":1,"mobilityFactor":1,"share":1}]}')
    expect(scenarioDigest(control)).toBe('145753e456d77cdb5673a3465f98f0eaab55289e26aea8945068e5485e09d313')
  })

  it('does not see title, notes, names, defaults typed out, or the order of keys', () => {
    const retold = ScenarioSchema.parse({
      ...CONTROL, title: 'Another name', notes: 'what we thought',
      sites: [{ name: 'a', share: 0.6, attachProbability: 0.3, detachPerS: 0, readyPerS: null }, { attachProbability: 0.0125, share: 0.4, name: 'b' }],
      vesicles: [{ name: 'v', share: 1, attachFactor: 1, mobilityFactor: 1 }],
      schedule: { initialFill: 0.12, sampleEveryMs: 20, durationS: 60, releases: [], decline: null },
    })
    expect(scenarioDigest(retold)).toBe(scenarioDigest(control))
  })

  it.each([
    ['density', { medium: { ...CONTROL.medium, densityPerUm3: 801 } }],
    ['count', { ribbon: { ...CONTROL.ribbon, count: 13 } }],
    ['supply', { reservoir: { supply: 'held' as const, marginSites: 13 } }],
    ['schedule', { schedule: { ...CONTROL.schedule, initialFill: 0.13 } }],
    ['order of the kinds of site', { sites: [...CONTROL.sites].reverse() }],
  ])('sees the %s', (_what, change) => {
    expect(scenarioDigest(ScenarioSchema.parse({ ...CONTROL, ...change }))).not.toBe(scenarioDigest(control))
  })
})

describe('outcome digest', () => {
  const identity = {
    scenarioDigest: 'aa', engine: { name: 'moorage-walk' as const, version: '1.0.0', algorithm: 'step' as const }, seed: 'kp-14', replicates: 2,
    blockDigests: [blockDigest({ from: 0, to: 2, filledSum: [[0, 3]], filledSumSq: [[0, 5]], firstAttachment: [3], events: [[1, 2]], exposureSteps: [[9, 8]] })],
  }
  it('covers engine, seed, replicates and blocks, each on its own', () => {
    const digests = [
      identity, { ...identity, seed: 'kp-15' }, { ...identity, replicates: 3 }, { ...identity, blockDigests: [] },
      { ...identity, engine: { ...identity.engine, version: '1.0.1' } }, { ...identity, engine: { ...identity.engine, algorithm: 'touch' as const } },
    ].map(outcomeDigest)
    expect(new Set(digests).size).toBe(digests.length)
    expect(digests[0]).toMatch(/^[0-9a-f]{64}$/)
  })
  it('does not see keys that are no part of the engine', () => {
    expect(outcomeDigest({ ...identity, engine: { ...identity.engine, ...{ note: 1 } } })).toBe(outcomeDigest(identity))
  })
})
