/** Weigh-ups of odd data: missing errors, points set aside, typed depletions, too few points, cancelling, resampling. */
import { describe, expect, it } from 'vitest'
import { MODELS, type Explanation } from '../../../shared/fitting/weighing/explanations'
import { sensitivitySteps } from '../../../shared/fitting/weighing/sensitivity'
import { simulateCondition } from '../../../shared/fitting/weighing/simulate-cells'
import { weighUp, type WeighProgress } from '../../../shared/fitting/weighing/weigh-up'
import type { ConditionData, SummaryPoint } from '../../../shared/recordings/types'
import { WeighSensitivitySchema, WeighSettingsSchema, WeighUpSchema, type WeighSettings, type WeighUp } from '../../../shared/schemas/weigh-up'
import { Stream, stateOf } from '../../../shared/walk/streams'

const TIMES = Float64Array.from({ length: 11 }, (_, i) => 0.05 * 2 ** i)
type Names = Partial<Pick<ConditionData, 'condition' | 'protocol' | 'manipulation'>>

/** A curve without noise, with the errors of nine cells. */
function exact(explanation: Explanation, parameters: number[], depletion = 0.88, names: Names = {}, more: Partial<SummaryPoint> = {}, times = TIMES): ConditionData {
  const ratio = new Float64Array(times.length), model = MODELS[explanation]
  model.curve(Float64Array.from([...parameters.map((value, i) => model.parameters[i]!.log ? Math.log(value) : value), depletion]), times, ratio, null)
  const points = Array.from(times, (time, i): SummaryPoint => ({ intervalMs: 1000 * time, ratio: ratio[i]!, sd: 0.033, sem: 0.011, n: 9, aside: null, line: null, ...more }))
  return { condition: 'control', protocol: 'long', manipulation: 'none', points, cells: [], ...names }
}
const SITES = [0.6, 1.2, 0.05]
const cellsOf = (names: Names, parameters = SITES, set = 0) => simulateCondition({ condition: 'control', protocol: 'long', manipulation: 'none', explanation: 'site-kinds', parameters, depletion: 0.88, cells: 9, ...names }, TIMES, new Stream(stateOf(5, 6, set)))

const run = (conditions: ConditionData[], settings: Partial<WeighSettings> = {}) => weighUp({ conditions, settings: WeighSettingsSchema.parse(settings) })
function found(conditions: ConditionData[], settings: Partial<WeighSettings> = {}): WeighUp {
  const result = run(conditions, settings)
  if (!result || 'refused' in result) throw new Error(result ? result.refused.message : 'stopped')
  return WeighUpSchema.parse(result)
}
const best = (result: WeighUp, explanation: Explanation) => result.candidates.find(one => one.best && one.explanation === explanation)!
const codeOf = (conditions: ConditionData[], settings: Partial<WeighSettings> = {}) => {
  const result = run(conditions, settings)
  return result && 'refused' in result ? result.refused.code : null
}

describe('noise', () => {
  it('one pooled SD over √n: the separate SEM does not count where n is known', () => {
    const plain = exact('site-kinds', SITES), odd = { ...plain, points: plain.points.map((point, i) => ({ ...point, sem: i % 2 ? 0.001 : 0.05 })) }
    expect(found([odd]).candidates.map(one => one.chi2)).toEqual(found([plain]).candidates.map(one => one.chi2))
    expect(found([plain]).noise).toMatchObject({ kind: 'pooled', pooledSd: 0.033 })
  })
  it('without n each point has its own SEM; with some n both are used; each is said', () => {
    expect(found([exact('site-kinds', SITES, 0.88, {}, { n: null })]).noise).toMatchObject({ kind: 'sem', pooledSd: null })
    const mixed = exact('site-kinds', SITES)
    mixed.points[3]!.n = null
    expect(found([mixed]).noise.kind).toBe('mixed')
  })
  it('without errors the scatter tells them, and the criterion is AICc', () => {
    const bare = exact('site-kinds', SITES, 0.88, {}, { sd: null, sem: null })
    bare.points.forEach((point, i) => Object.assign(point, { ratio: point.ratio + 0.004 * (-1) ** i }))
    const result = found([bare])
    expect([result.noise.kind, result.criterion]).toEqual(['scatter', 'aicc'])
    const one = best(result, 'one-kind'), n = 11, k = 3
    expect(one.criterion).toBeCloseTo(n * Math.log(one.chi2 / n) + 2 * k + 2 * k * (k + 1) / (n - k - 1), 6)
    expect(one.pValue).toBeNull()
    expect(one.parameters[0]!.low).toBeLessThan(one.parameters[0]!.value)
  })
  it('a SEM of 0 is no error', () => {
    expect(found([exact('site-kinds', SITES, 0.88, {}, { n: null, sd: null, sem: 0 })]).noise.kind).toBe('scatter')
  })
  it('another SD leaves every fit where it is and scales χ²', () => {
    const conditions = [cellsOf({})], one = found(conditions, { cells: false, pooledSd: 0.03 }), two = found(conditions, { cells: false, pooledSd: 0.06 })
    for (const explanation of ['one-kind', 'site-kinds', 'declining-drive'] as const) expect(best(one, explanation).chi2 / best(two, explanation).chi2).toBeCloseTo(4, 5)
  })
})

describe('the verdict', () => {
  it('one kind: one exponential suffices, and nothing is called excluded', () => {
    const result = found([exact('one-kind', [0.25])])
    expect(result.verdict).toMatchObject({ kind: 'prefers', rule: 'suffices', explanation: 'one-kind' })
    expect(result.verdict.sentence).toContain('One exponential suffices')
    expect(result.doubts.map(one => one.code)).toContain('one-curve')
  })
  it('two steps: the faster one changed; which of them is capture is left open', () => {
    const result = found([exact('two-step', [0.3, 2]), exact('two-step', [0.3, 0.5], 0.88, { condition: 'drug', manipulation: 'drug' })])
    expect(result.verdict.explanation).toBe('two-step')
    expect(result.verdict.changes[0]).toMatchObject({ parameter: 'fasterStep', named: true })
    expect(result.doubts.map(one => one.code)).toContain('which-step')
  })
  it('changes that explain equally well are all named', () => {
    const weak = { sd: 0.3, sem: 0.1 }, result = found([exact('one-kind', [0.3], 0.88, {}, weak), exact('one-kind', [0.25], 0.88, { condition: 'drug', manipulation: 'drug' }, weak)])
    expect(result.verdict.changes[0]).toMatchObject({ named: false })
    expect(result.verdict.changeSentences[0]).toContain('cannot be told apart')
  })
  it('a gross misfit of every explanation is no preference', () => {
    const wild = exact('site-kinds', SITES)
    wild.points.forEach((point, i) => Object.assign(point, { ratio: point.ratio + (i % 3 === 0 ? 0.15 : -0.1) }))
    expect(found([wild]).verdict).toMatchObject({ kind: 'cannot-tell', rule: 'none-acceptable' })
  })
  it('cells that differ: nothing but one exponential is preferred from their means', () => {
    const cells = simulateCondition({ condition: 'control', protocol: 'long', manipulation: 'none', explanation: 'spread', parameters: [0.3, 2.25], depletion: 0.88, cells: 9, betweenCells: true }, TIMES, new Stream(stateOf(1, 2, 3)))
    const result = found([cells], { cells: false })
    expect(result.noise.pooledSd).toBeGreaterThan(0.1)
    expect([null, 'one-kind']).toContain(result.verdict.explanation)
    const sure = found([{ ...cells, cells: [], points: exact('site-kinds', SITES, 0.88, {}, { n: 400, sd: 0.2 }).points }])
    expect(sure.verdict).toMatchObject({ kind: 'cannot-tell', explanation: null })
  })
  it('times in another scale give the same verdict, rates in that scale', () => {
    const quick = found([exact('site-kinds', [0.6, 12, 0.5], 0.88, {}, {}, TIMES.map(time => time / 10))]), slow = found([exact('site-kinds', SITES)])
    expect(quick.candidates.map(one => [one.explanation, Number(one.chi2.toFixed(6))])).toEqual(slow.candidates.map(one => [one.explanation, Number(one.chi2.toFixed(6))]))
    expect(best(quick, 'site-kinds').parameters[1]!.value).toBeCloseTo(12, 4)
    expect(best(quick, 'site-kinds').parameters[1]!.time!.valueS).toBeCloseTo(1 / 12, 6)
  })
  it('a changed depletion is found as such', () => {
    const result = found([exact('site-kinds', SITES), exact('site-kinds', SITES, 0.5, { condition: 'drug', manipulation: 'drug' }), exact('site-kinds', SITES, 0.35, { condition: 'short', protocol: 'short' })])
    const [lead] = result.candidates.filter(one => one.explanation === 'site-kinds')
    expect(lead!.changes).toMatchObject([{ manipulation: 'drug', parameter: 'depletion' }])
    expect(lead!.parameters[lead!.changes[0]!.to!]!.value).toBeCloseTo(0.5, 5)
    expect(lead!.parameters[lead!.changes[0]!.from!]!.value).toBeCloseTo(0.88, 5)
  })
})

describe('data', () => {
  it('points set aside and points without a number stay out', () => {
    const plain = exact('site-kinds', SITES), aside = exact('site-kinds', SITES)
    aside.points[4] = { ...aside.points[4]!, ratio: 3, aside: 'slipped' }
    expect(found([aside]).conditions[0]).toMatchObject({ aside: 1 })
    expect(found([aside]).candidates[0]!.chi2).toBeCloseTo(0, 6)
    expect(found([plain]).conditions[0]!.aside).toBe(0)
  })
  it('unsorted points and two points of one interval are taken as they are', () => {
    const plain = exact('limited-store', [1.2, 0.05, 0.5]), mixed = { ...plain, points: [...plain.points, plain.points[2]!].reverse() }
    expect(best(found([mixed]), 'limited-store').chi2).toBeCloseTo(0, 5)
  })
  it('without an untouched condition the first manipulation stands for it, and that is said', () => {
    const result = found([exact('site-kinds', SITES, 0.88, { manipulation: 'a' }), exact('site-kinds', [0.2, 1.2, 0.05], 0.88, { condition: 'b', manipulation: 'b' })])
    expect(result.untouched).toBe('a')
    expect(result.doubts.map(one => one.code)).toContain('no-untouched')
    expect(result.notes.join()).toContain('untouched')
  })
  it('a typed depletion is not fitted; its source is said', () => {
    const result = found([exact('site-kinds', SITES)], { typedDepletion: [{ protocol: 'long', value: 0.88, source: 'capacitance, ours' }] })
    expect(best(result, 'site-kinds')).toMatchObject({ free: 3, dof: 8 })
    expect(best(result, 'site-kinds').parameters.some(one => one.name === 'depletion')).toBe(false)
    expect(result.notes.join()).toContain('capacitance, ours')
  })
  it('explanations with too many parameters are left, with the reason', () => {
    const four = found([exact('one-kind', [0.3], 0.88, {}, {}, TIMES.slice(2, 6))])
    expect(four.left.map(one => one.explanation)).toEqual(['site-kinds', 'limited-store', 'declining-drive'])
  })
  it('is refused: no points, too few, all equal, only interval 0, one name twice', () => {
    const plain = exact('site-kinds', SITES), flat = exact('one-kind', [1], 0.88, {}, { ratio: 0.5 })
    expect(codeOf([])).toBe('no-points')
    expect(codeOf([{ ...plain, points: plain.points.slice(0, 2) }])).toBe('too-few-points')
    expect(codeOf([flat])).toBe('flat')
    expect(codeOf([{ ...plain, points: plain.points.map(point => ({ ...point, intervalMs: 0 })) }])).toBe('no-intervals')
    expect(codeOf([plain, plain])).toBe('same-name')
  })
  it('recovery above 1 and below 0 is taken as noise', () => {
    const noisy = exact('one-kind', [0.5], 0.97)
    noisy.points[0]!.ratio = -0.02
    noisy.points[10]!.ratio = 1.07
    expect(found([noisy]).candidates.length).toBeGreaterThan(3)
  })
  it('a parameter on its bound or out of reach is flagged, its interval open there', () => {
    const two = best(found([exact('one-kind', [0.3])]), 'two-step').parameters.find(one => one.name === 'fasterStep')!
    expect([two.unresolved === null, two.high]).toEqual([false, null])
  })
})

describe('steps', () => {
  it('a caller that stops asking stops it', () => {
    const seen: WeighProgress[] = []
    expect(weighUp({ conditions: [exact('site-kinds', SITES)], settings: WeighSettingsSchema.parse({}) }, progress => seen.push(progress) < 3)).toBeNull()
    expect(seen.length).toBe(3)
    expect(seen.every(one => one.done <= one.total)).toBe(true)
  })
  it('resampling cells: the same seed gives the same document, another seed another', () => {
    const conditions = [cellsOf({}), cellsOf({ condition: 'drug', manipulation: 'drug' }, [0.2, 1.2, 0.05], 1)], settings = { resamples: 25, seed: 'one' }
    const first = found(conditions, settings)
    expect(first.resample).toMatchObject({ asked: 25, done: 25, seed: 'one' })
    expect(first.resample!.best.reduce((sum, one) => sum + one.count, 0)).toBe(25)
    expect(first.resample!.parameters[0]!.low).toBeLessThan(first.resample!.parameters[0]!.high)
    expect(found(conditions, settings).digest).toBe(first.digest)
    expect(found(conditions, { ...settings, seed: 'two' }).digest).not.toBe(first.digest)
  })
  it('resampling that is stopped keeps what is done, marked partial', () => {
    let asked = 0
    const result = weighUp({ conditions: [cellsOf({})], settings: WeighSettingsSchema.parse({ resamples: 50 }), stopResampling: () => asked++ >= 7 })
    expect(result && 'refused' in result ? null : result?.resample).toMatchObject({ asked: 50, done: 7, partial: true })
  })
  it('resamples of means are not made, and that is said', () => {
    const result = found([exact('site-kinds', SITES)], { resamples: 20 })
    expect(result.resample).toBeNull()
    expect(result.notes.join()).toContain('cannot be resampled')
  })
  it('sensitivity: rows for each protocol, unequal emptying taken up by its own parameter', () => {
    const conditions = [exact('site-kinds', SITES), exact('site-kinds', [0.75, 1.2, 0.05], 0.35, { condition: 'short', protocol: 'short' })]
    const steps = sensitivitySteps({ conditions, settings: WeighSettingsSchema.parse({}) })
    let step = steps.next()
    while (!step.done) step = steps.next()
    const result = WeighSensitivitySchema.parse(step.value)
    expect(new Set(result.depletions.map(one => one.protocol))).toEqual(new Set(['long', 'short']))
    // Without noise the share of the short protocol differs by the odds 2: only the freed fit reaches χ² 0.
    expect(Number(/χ² falls by ([\d.]+)/.exec(result.uneven.sentence)![1])).toBeCloseTo(found(conditions).candidates.find(one => one.best && one.explanation === 'site-kinds')!.chi2, 0)
    expect(result.rescale).toContain('does not depend')
  })
})
