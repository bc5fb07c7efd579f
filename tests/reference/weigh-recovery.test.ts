/** Recovery of known truth: ten drawn sets per explanation, weighed on all four conditions; the calibration's own draws with a fixed seed. */
import { describe, expect, it } from 'vitest'
import { conditionsOf, drawSet, TRUTHS } from '../../scripts/support/calibration'
import { placeName } from '../../shared/fitting/weighing/joint-problem'
import { weighQuickly, type Weighing } from '../../shared/fitting/weighing/weigh-up'
import { WeighSettingsSchema } from '../../shared/schemas/weigh-up'

const SETS = 10
const settings = WeighSettingsSchema.parse({})

function judged(truth: (typeof TRUTHS)[number], design: Parameters<typeof conditionsOf>[0]): Weighing[] {
  return Array.from({ length: SETS }, (_, set) => {
    const found = weighQuickly({ conditions: conditionsOf(design, drawSet(truth, set % 3, set, 'recovery')), settings })
    if ('refused' in found) throw new Error(found.refused.message)
    return found
  })
}

describe('recovery of known truth from cells', () => {
  it.each(TRUTHS.map(truth => [truth.explanation, truth] as const))('%s: four conditions, at least 9 of 10 right and none wrong', (explanation, truth) => {
    const verdicts = judged(truth, 'four').map(({ judgement }) => judgement.explanation)
    expect(verdicts.filter(one => one === explanation).length).toBeGreaterThanOrEqual(9)
    expect(verdicts.filter(one => one !== null && one !== explanation)).toEqual([])
  })

  it.each(TRUTHS.map(truth => [truth.explanation, truth] as const))('%s: control alone is never wrong', (explanation, truth) => {
    const verdicts = judged(truth, 'control').map(({ judgement }) => judgement.explanation)
    expect(verdicts.filter(one => one !== null && one !== explanation)).toEqual([])
  })

  it('two kinds of site: what the manipulations changed, and values within a tenth of the truth', () => {
    const truth = TRUTHS[0]!
    for (const [set, { judgement }] of judged(truth, 'four').entries()) {
      const { found } = judgement.ranked[0]!, [share, quick, reluctant] = truth.settings[set % 3]!
      expect(judgement.changes.map(one => [one.manipulation, placeName(found.model, one.place), one.named])).toEqual([['A', 'quickRate', true], ['B', 'quickShare', true]])
      expect(Math.abs(found.parameters[0]! - share!)).toBeLessThan(0.06)
      expect(Math.abs(found.parameters[1]! - Math.log(quick!))).toBeLessThan(0.3)
      expect(Math.abs(found.parameters[2]! - Math.log(reluctant!))).toBeLessThan(0.3)
    }
  })
})
