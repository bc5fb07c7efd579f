/** The outcome document: its sums, its honesty about what is not known, and that it is the same however the blocks came. */
import { describe, expect, it } from 'vitest'
import { OutcomeSchema } from '../../../shared/schemas/outcome'
import { frameOf } from '../../../shared/walk/frame'
import { buildOutcome } from '../../../shared/walk/outcome'
import { compilePlan } from '../../../shared/walk/plan'
import { engineOf, smallScenario, walkBlocks, walkOutcome } from './walked'

const twoKinds = smallScenario({
  sites: [{ name: 'quick', share: 0.6, attachProbability: 0.5 }, { name: 'slow', share: 0.4, attachProbability: 0.05, readyPerS: 4 }],
  schedule: { durationS: 2, sampleEveryMs: 50, initialFill: 0.1 },
})

describe('buildOutcome', () => {
  const outcome = walkOutcome(twoKinds, 'stirred', 'sums', 120)

  it('makes a document that its schema accepts', () => {
    expect(OutcomeSchema.parse(JSON.parse(JSON.stringify(outcome)))).toEqual(outcome)
    expect(outcome.timesS[0]).toBe(0)
    expect(outcome.classes.map(kind => kind.sites)).toEqual([12, 8])
    expect(outcome.classes[0]!.meanReady).toBeUndefined()
    expect(outcome.classes[1]!.meanReady).toHaveLength(outcome.timesS.length)
  })

  it('τ is exposure over attachments, ratio is expected over seen attachments', () => {
    const frame = frameOf(twoKinds)
    let expected = 0, seen = 0
    outcome.classes.forEach((kind, j) => {
      expect(kind.tau.valueS).toBeCloseTo(kind.exposureS / kind.events, 12)
      const chance = frame.occupancy / 6 * frame.attachProbability[j]![0]!
      expect(kind.ratio.value).toBeCloseTo(chance * kind.exposureS / frame.stepS / kind.events, 10)
      expected += chance * kind.exposureS / frame.stepS
      seen += kind.events
    })
    expect(outcome.ratio.value).toBeCloseTo(expected / seen, 10)
    expect(outcome.firstAttachment.histogram.reduce((sum, one) => sum + one, 0)).toBe(seen)
  })

  it('the three parts add up to τ, per kind of site and share-weighted', () => {
    const sum = (parts: (typeof outcome)['decomposition']) => parts.collisionS! + parts.failedHitsS! + parts.depletionS.value!
    for (const kind of outcome.classes) expect(sum(kind.decomposition)).toBeCloseTo(kind.tau.valueS!, 10)
    expect(sum(outcome.decomposition)).toBeCloseTo(outcome.classes.reduce((all, kind) => all + kind.sites / 20 * kind.tau.valueS!, 0), 10)
  })

  it('every interval holds its value', () => {
    const all = [outcome.ratio, outcome.decomposition.depletionS, ...outcome.classes.flatMap(kind => [kind.ratio, kind.decomposition.depletionS, { value: kind.tau.valueS, low: kind.tau.lowS, high: kind.tau.highS }])]
    for (const { value, low, high } of all) {
      expect(low!).toBeLessThan(value!)
      expect(high!).toBeGreaterThan(value!)
    }
  })

  it('is the same with the frame and digests given or made, and in blocks of any cut but for their list', () => {
    const blocks = walkBlocks(twoKinds, 'stirred', 'sums', 120)
    const given = { scenario: twoKinds, seed: 'sums', engine: engineOf('stirred'), partial: false, landingError: 0 }
    expect(buildOutcome({ ...given, blocks, frame: frameOf(twoKinds), blockDigests: outcome.blocks.map(block => block.digest) })).toEqual(outcome)
    const otherwise = buildOutcome({ ...given, blocks: [...blocks].reverse() })
    expect({ ...otherwise, blocks: [], digest: '' }).toEqual({ ...outcome, blocks: [], digest: '' })
    expect(() => buildOutcome({ ...given, blocks: blocks.slice(1) })).toThrow(/starts at replicate 50/)
    expect(() => buildOutcome({ ...given, blocks: [blocks[0]!, blocks[2]!] })).toThrow(/do not touch/)
  })

  it('the frame is the plan without its lattice', () => {
    for (const reservoir of [{ supply: 'stirred' as const }, { supply: 'held' as const, marginSites: 5 }, { supply: 'sealed' as const, sizeUm: [0.6, 0.61, 0.5] as [number, number, number] }]) {
      const scenario = smallScenario({ reservoir, ribbon: { shape: 'plate', rows: 3, columns: 5, faces: 2, classLayout: 'rows' } })
      const { flags: _flags, siteBehind: _behind, voxelOfSite: _voxel, ...rest } = compilePlan(scenario)
      expect(frameOf(scenario)).toEqual(rest)
    }
  })
})

describe('what is not known is null', () => {
  it('one replicate has no interval, decides nothing and says why', () => {
    const one = walkOutcome(twoKinds, 'stirred', 'one', 1)
    expect(one.ratio.value).not.toBeNull()
    expect([one.ratio.low, one.ratio.high]).toEqual([null, null])
    expect(one.agreement).toMatchObject({ verdict: 'undecided', reason: 'too-few', replicatesToDecide: null })
    expect(one.varFilledTotal.every(value => value === 0)).toBe(true)
  })

  it('without attachments there is no τ and no ratio', () => {
    const never = walkOutcome(smallScenario({ sites: [{ name: 'never', share: 1, attachProbability: 0 }] }), 'stirred', 'never', 20)
    expect(never.ratio).toEqual({ value: null, low: null, high: null })
    expect(never.classes[0]!.tau.valueS).toBeNull()
    expect(never.closedForm.tauS).toBeNull()
    expect(never.agreement).toMatchObject({ verdict: 'undecided', statistic: null, pValue: null })
    expect(never.tau.unfilledShare).toBe(1)
    expect(OutcomeSchema.safeParse(never).success).toBe(true)
  })

  it('a class whose share rounds away has no say', () => {
    const rounded = walkOutcome(smallScenario({ sites: [{ name: 'all', share: 0.99, attachProbability: 0.5 }, { name: 'none', share: 0.01, attachProbability: 0.1 }] }), 'stirred', 'rounded', 60)
    expect(rounded.classes[1]).toMatchObject({ sites: 0, events: 0, exposureS: 0, reading: null })
    expect(rounded.tau.valueS).toBeCloseTo(rounded.classes[0]!.tau.valueS!, 12)
    expect(rounded.decomposition.depletionS.value).not.toBeNull()
  })

  it('two kinds of site have no overall τ unless every site filled; then it is the mean attachment time', () => {
    expect(walkOutcome(twoKinds, 'stirred', 'open', 40).tau.valueS).toBeNull()
    const long = walkOutcome(smallScenario({ sites: [{ name: 'a', share: 0.5, attachProbability: 1 }, { name: 'b', share: 0.5, attachProbability: 0.8 }], schedule: { durationS: 30, sampleEveryMs: 500 } }), 'stirred', 'long', 60)
    expect(long.tau.unfilledShare).toBe(0)
    expect(long.tau.valueS).toBeCloseTo(long.classes.reduce((sum, kind) => sum + kind.exposureS, 0) / (60 * 20), 12)
  })

  it('decline leaves no closed τ and no depletion, yet a ratio', () => {
    const declining = walkOutcome(smallScenario({ schedule: { durationS: 2, sampleEveryMs: 50, decline: { restFactor: 0.2, timeConstantS: 0.3 } } }), 'stirred', 'declining', 300)
    expect(declining.closedForm.tauS).toBeNull()
    expect(declining.decomposition.depletionS.value).toBeNull()
    expect(declining.agreement.verdict).toBe('agrees')
  })
})
