/** `weigh`: the document of a weigh-up, in words, and what it refuses with which code. */
import { fileURLToPath } from 'node:url'
import { describe, expect, it, vi } from 'vitest'
import { WeighUpSchema } from '../../../shared/schemas/weigh-up'
import { fileWith, run } from './support'

// A busy machine takes seconds to start a process.
vi.setConfig({ testTimeout: 180_000 })

const demo = (name: string) => fileURLToPath(new URL(`../../../scripts/demo-data/${name}`, import.meta.url))
const documentOf = async (options: string[]) => {
  const { code, out, problems } = await run('weigh', [...options, '--json'])
  expect([code, problems.includes('Fault')]).toEqual([0, false])
  return WeighUpSchema.parse(JSON.parse(out))
}

describe('weigh --json', () => {
  it('four conditions: two kinds of site, and what each manipulation changed', async () => {
    const found = await documentOf([demo('summary.csv')])
    expect(found.verdict).toMatchObject({ kind: 'prefers', explanation: 'site-kinds', changes: [{ manipulation: 'TP-4 peptide', parameter: 'quickShare' }, { manipulation: 'AK-7', parameter: 'quickRate' }] })
    expect(found.conditions.map(one => one.condition)).toEqual(['control', 'TP-4 peptide', 'AK-7', 'short'])
  })
  it('chosen conditions, the SD still pooled over the whole file: control alone cannot tell', async () => {
    const found = await documentOf([demo('summary.csv'), '--condition', 'control'])
    expect(found.verdict.kind).toBe('cannot-tell')
    expect(found.noise.pooledSd).toBeCloseTo(0.0333, 4)
    expect(found.candidates.find(one => one.explanation === 'site-kinds')!.chi2).toBeCloseTo(3.2, 1)
  })
  it('cells with resampling by a seed; means of the same file on request', async () => {
    const [cells, means] = await Promise.all([documentOf([demo('cells.csv'), '--cells', '--condition', 'control', '--resample', '20', '--seed', 's']), documentOf([demo('cells.csv'), '--means', '--condition', 'control'])])
    expect([cells.noise.kind, cells.resample!.done, means.noise.kind, means.resample]).toEqual(['cells', 20, 'pooled', null])
  })
  it('files without names of conditions are named after themselves', async () => {
    const rows = (shift: number) => ['interval_ms,ratio_mean,ratio_sem,n', ...[50, 100, 200, 400, 800, 1600, 3200].map((time, i) => `${time},${(0.1 + shift + 0.12 * i).toFixed(3)},0.01,9`)].join('\n')
    const found = await documentOf([fileWith(rows(0)), fileWith(rows(0.02))])
    expect(new Set(found.conditions.map(one => one.condition)).size).toBe(2)
  })
})

describe('weigh', () => {
  it('in words: verdict, ranking, doubts, what would settle it, sensitivity', async () => {
    const { code, out } = await run('weigh', [demo('summary.csv'), '--condition=control', '--sensitivity'])
    expect(code).toBe(0)
    for (const part of ['Cannot tell:', 'Doubts:', 'What would settle it:', 'does not depend on them', 'Digest ']) expect(out).toContain(part)
  })
  it.each([
    [['nowhere.csv'], 'There is no such file.'],
    [[], 'A recording file is wanted.'],
    [[demo('summary.csv'), '--cells'], 'have no cells'],
    [[demo('summary.csv'), '--resample', '20'], 'have no cells'],
    [[demo('cells.csv'), '--cells', '--means'], 'not both'],
    [[demo('summary.csv'), '--condition', 'elsewhere'], 'There is no condition “elsewhere”'],
    [[demo('summary.csv'), '--resample', 'many'], 'whole number'],
    [[fileWith('interval_ms,ratio_mean,ratio_sem,n\n50,0.1,0.01,9\n100,0.2,0.01,9\n')], 'too few to weigh'],
  ])('%j is refused with code 2', async (options, words) => {
    const { code, out, problems } = await run('weigh', options)
    expect([code, out]).toEqual([2, ''])
    expect(problems).toContain(words)
  })
})
