/** The verdict rule at its limits, on made-up χ² of 40 points. */
import { describe, expect, it } from 'vitest'
import { EXPLANATIONS, MODELS, type Explanation } from '../../../shared/fitting/weighing/explanations'
import { prepare, type WeighData } from '../../../shared/fitting/weighing/prepare'
import type { Found } from '../../../shared/fitting/weighing/search'
import { layOut } from '../../../shared/fitting/weighing/joint-problem'
import { judge } from '../../../shared/fitting/weighing/verdict'

const points = Array.from({ length: 40 }, (_, i) => ({ intervalMs: 50 + 100 * i, ratio: 0.1 + 0.02 * i, sd: 0.03, sem: 0.01, n: 9, aside: null, line: null }))
const DATA: WeighData = prepare([{ condition: 'control', protocol: 'step', manipulation: 'none', cells: [], points }])

/** Free parameters: one kind 2, two steps and spread 3, the others 4; the spread's variance is put so that it decides nothing. */
function judged(chi2: Partial<Record<Explanation, number>>, data = DATA) {
  const found = new Map(EXPLANATIONS.filter(one => chi2[one] !== undefined).map((explanation): [Explanation, Found[]] => {
    const model = MODELS[explanation], layout = layOut(model, data.conditions, new Map(), data)
    const parameters = Float64Array.from(layout.slots, ({ place }) => place === model.parameters.length ? 0.9 : explanation === 'spread' && place === 1 ? 0.02 : 0)
    return [explanation, [{ model, changes: new Map(), layout, parameters, chi2: chi2[explanation]! }]]
  }))
  return judge(found, data, { typed: {}, cells: false })
}

describe('the verdict rule', () => {
  it('one kind is enough until a richer one gains 7 with one parameter more, or 10 with two', () => {
    expect(judged({ 'one-kind': 36, 'two-step': 29.1, 'site-kinds': 26.1 })).toMatchObject({ kind: 'prefers', rule: 'suffices', explanation: 'one-kind' })
    expect(judged({ 'one-kind': 36, 'two-step': 28.9, 'site-kinds': 30 })).toMatchObject({ kind: 'cannot-tell', rule: 'tied' })
    expect(judged({ 'one-kind': 36, 'two-step': 35, 'site-kinds': 25.9 })).toMatchObject({ kind: 'cannot-tell', rule: 'tied' })
  })
  it('one kind that does not fit is not enough', () => {
    expect(judged({ 'one-kind': 80, 'two-step': 79, 'site-kinds': 78 })).toMatchObject({ kind: 'cannot-tell', rule: 'none-acceptable' })
  })
  it('the best needs 6 before every other and 10 before one kind', () => {
    // Criteria: 30 + 8 against 42.1 + 2·1 … each with its own 2k.
    expect(judged({ 'site-kinds': 30, 'limited-store': 36.1, 'one-kind': 44.1 })).toMatchObject({ kind: 'prefers', rule: 'ahead', explanation: 'site-kinds', within: ['site-kinds'] })
    expect(judged({ 'site-kinds': 30, 'limited-store': 35.9, 'one-kind': 60 })).toMatchObject({ kind: 'cannot-tell', within: ['site-kinds', 'limited-store'] })
    expect(judged({ 'site-kinds': 30, 'limited-store': 60, 'one-kind': 43.9 })).toMatchObject({ kind: 'cannot-tell', within: ['site-kinds', 'one-kind'] })
  })
  it('the number of parameters counts twice', () => {
    expect(judged({ 'two-step': 30, 'site-kinds': 34.1, 'one-kind': 90 })).toMatchObject({ kind: 'prefers', explanation: 'two-step' })
    expect(judged({ 'two-step': 34.1, 'site-kinds': 30, 'one-kind': 90 })).toMatchObject({ kind: 'cannot-tell' })
  })
  it('χ² is divided by the excess scatter of the best fit', () => {
    const result = judged({ 'site-kinds': 54, 'limited-store': 62, 'one-kind': 200 })
    expect(result.scale).toBeCloseTo(54 / 36, 12)
    expect(result.ranked[1]!.behind).toBeCloseTo(8 / 1.5, 12)
    expect(result.kind).toBe('cannot-tell')
  })
  it('a best fit that is not acceptable is never preferred', () => {
    expect(judged({ 'site-kinds': 70, 'limited-store': 300, 'one-kind': 400 })).toMatchObject({ kind: 'cannot-tell', rule: 'none-acceptable' })
  })
})
