/** The invented demo bench weighed: χ² of an independent least-squares program (weights: pooled SD 0.0333 over √n), and the verdict of every row. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { Explanation } from '../../shared/fitting/weighing/explanations'
import { growthSteps } from '../../shared/fitting/weighing/growth'
import { weighQuickly, weighUp } from '../../shared/fitting/weighing/weigh-up'
import { readBytes } from '../../shared/recordings/read'
import { WeighGrowthSchema, WeighSettingsSchema, WeighUpSchema, type WeighUp } from '../../shared/schemas/weigh-up'

function conditionsIn(file: string) {
  const read = readBytes(new Uint8Array(readFileSync(new URL(`../../scripts/demo-data/${file}`, import.meta.url))))
  if (!read.ok) throw new Error(read.problem.message)
  return read.reading.conditions
}
const BENCH = conditionsIn('summary.csv'), settings = WeighSettingsSchema.parse({})

function weighed(names: readonly string[], all = BENCH): WeighUp {
  const found = weighUp({ conditions: all.filter(one => names.includes(one.condition)), pool: all, settings })
  if (!found || 'refused' in found) throw new Error('refused')
  return found
}

type Row = [name: string, conditions: string[], chi2: Partial<Record<Explanation, [chi2: number, dof: number]>>, prefers: Explanation | null, within: Explanation[]]
const ALL = BENCH.map(one => one.condition)
const ROWS: Row[] = [
  ['control', ['control'], { 'site-kinds': [3.2, 7], 'limited-store': [4.1, 7], 'declining-drive': [1.9, 7], 'spread': [34.1, 8], 'one-kind': [679, 9], 'two-step': [679.3, 8] }, null, ['site-kinds', 'limited-store', 'declining-drive']],
  ['control and short', ['control', 'short'], { 'site-kinds': [8.2, 17], 'declining-drive': [6.9, 17], 'limited-store': [140, 17], 'spread': [46.5, 18], 'one-kind': [788, 19], 'two-step': [787.9, 18] }, null, ['site-kinds', 'declining-drive']],
  ['control and AK-7', ['control', 'AK-7'], { 'site-kinds': [8.2, 17], 'limited-store': [9.6, 17], 'spread': [159, 18], 'declining-drive': [236, 17], 'two-step': [869.5, 18] }, null, ['site-kinds', 'limited-store']],
  ['control and peptide', ['control', 'TP-4 peptide'], { 'site-kinds': [19.4, 17], 'limited-store': [76, 17], 'declining-drive': [68, 17], 'two-step': [818.7, 18] }, 'site-kinds', ['site-kinds']],
  ['all four', ALL, { 'site-kinds': [30.2, 37], 'limited-store': [237, 37], 'declining-drive': [291, 37], 'spread': [301, 38], 'one-kind': [1088, 39], 'two-step': [1087.9, 38] }, 'site-kinds', ['site-kinds']],
]

describe('the demo bench', () => {
  it.each(ROWS)('%s: χ² within 0.3, above 30 within 3 %%, and the verdict', (_, names, expected, prefers, within) => {
    const found = weighed(names)
    for (const [explanation, [chi2, dof]] of Object.entries(expected)) {
      const one = found.candidates.find(candidate => candidate.best && candidate.explanation === explanation)!
      expect(Math.abs(one.chi2 - chi2), `${explanation}: ${one.chi2}`).toBeLessThan(chi2 > 30 ? 0.03 * chi2 : 0.3)
      expect(one.dof).toBe(dof)
    }
    expect([found.verdict.kind, found.verdict.explanation]).toEqual([prefers ? 'prefers' : 'cannot-tell', prefers])
    expect([...found.verdict.within].sort()).toEqual([...within].sort())
    expect(found.spread?.reading).toBe('inside-cells')
  })

  it('all four: what each manipulation changed, with its values', () => {
    const found = weighed(ALL), lead = found.candidates[0]!
    expect(found.verdict.changes).toEqual([{ manipulation: 'TP-4 peptide', parameter: 'quickShare', named: true, alternatives: [] }, { manipulation: 'AK-7', parameter: 'quickRate', named: true, alternatives: [] }])
    expect(found.verdict.margin).toBeGreaterThan(200)
    const value = (name: string, manipulation: string | null) => lead.parameters.find(one => one.name === name && one.manipulation === manipulation)!
    // Ends of profile intervals of the same independent program, ± the last digit given.
    const expected: [string, string | null, number, number, number][] = [['quickShare', null, 0.593, 0.572, 0.614], ['quickRate', null, 1.214, 1.097, 1.344], ['reluctantRate', null, 0.0483, 0.0452, 0.0516], ['quickRate', 'AK-7', 0.317, 0.287, 0.352], ['quickShare', 'TP-4 peptide', 0.193, 0.168, 0.217]]
    for (const [name, manipulation, middle, low, high] of expected) {
      const one = value(name, manipulation)
      expect([one.value / middle, one.low! / low, one.high! / high].every(part => Math.abs(part - 1) < 0.006), `${name}: ${one.value} ${one.low} ${one.high}`).toBe(true)
    }
    expect(found.verdict.changeSentences[1]).toMatch(/^AK-7 lowers the quick rate from 1\.21\u00a0\/s \(1\.10 to 1\.34\) to 0\.317\u00a0\/s/)
  })

  it('cells with their covariance: the same verdict, χ² 38.5, 291, 357, 378, 1371', () => {
    const cells = conditionsIn('cells.csv'), found = weighed(ALL, cells)
    const expected: Partial<Record<Explanation, number>> = { 'site-kinds': 38.5, 'limited-store': 290.7, 'declining-drive': 356.8, 'spread': 378.2, 'one-kind': 1370.6 }
    for (const [explanation, chi2] of Object.entries(expected)) expect(Math.abs(found.candidates.find(one => one.best && one.explanation === explanation)!.chi2 / chi2 - 1)).toBeLessThan(0.005)
    expect([found.noise.kind, found.verdict.explanation]).toEqual(['cells', 'site-kinds'])
  })

  it('four conditions weigh within a second', () => {
    weighed(ALL)
    const times = [1, 2, 3].map(() => {
      const began = performance.now()
      weighed(ALL)
      return performance.now() - began
    })
    expect(Math.min(...times)).toBeLessThan(1000)
  })

  it('the same numbers again, in a document that its schema takes', () => {
    const found = weighed(['control', 'short'])
    expect(WeighUpSchema.parse(JSON.parse(JSON.stringify(found)))).toEqual(found)
    expect(weighed(['control', 'short']).digest).toBe(found.digest)
    expect(weighed(['control']).digest).not.toBe(found.digest)
    // From the document's own settings, without the wider set that the SD was pooled over.
    for (const file of ['summary.csv', 'cells.csv']) {
      const all = conditionsIn(file), first = weighed(['control'], all), again = weighUp({ conditions: all.filter(one => one.condition === 'control'), settings: first.settings })
      expect(again && 'digest' in again ? again.digest : null).toBe(first.digest)
    }
  })

  it('control alone: a short step would exclude the limited store and leave the other two', () => {
    const [truth] = weighed(['control']).settle.filter(one => one.what === 'short-step' && one.pairs[0]!.truth === 'site-kinds')
    expect(truth!.separates).toBe(false)
    expect(truth!.pairs.find(one => one.rival === 'limited-store')!.gain).toBeGreaterThan(100)
    expect(truth!.pairs.find(one => one.rival === 'declining-drive')!.gain).toBeLessThan(6)
  })

  it('how the verdict grew: control, with each of the others, all four', () => {
    const steps = growthSteps({ conditions: BENCH, settings })
    let step = steps.next()
    while (!step.done) step = steps.next()
    const rows = WeighGrowthSchema.parse(step.value), sites = rows.map(row => row.chi2.find(one => one.explanation === 'site-kinds')!)
    expect(rows.map(row => row.conditions)).toEqual([[0], [0, 1], [0, 2], [0, 3], [0, 1, 2, 3]])
    expect(rows.map(row => row.explanation)).toEqual([null, 'site-kinds', null, null, 'site-kinds'])
    ;[3.2, 19.4, 8.2, 8.2, 30.2].forEach((chi2, i) => expect(Math.abs(sites[i]!.chi2 - chi2)).toBeLessThan(0.3))
    expect(sites.map(one => one.dof)).toEqual([7, 17, 17, 17, 37])
  })

  it('weighing quickly finds what weighing in full finds', () => {
    const quick = weighQuickly({ conditions: BENCH, settings })
    if ('refused' in quick) throw new Error(quick.refused.message)
    expect(quick.judgement.ranked.map(one => [one.explanation, Number(one.found.chi2.toFixed(3))])).toEqual(weighed(ALL).candidates.filter(one => one.best).map(one => [one.explanation, Number(one.chi2.toFixed(3))]))
  })
})
