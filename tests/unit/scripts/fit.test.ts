/** `fit`: a recording's fits as a document, in words, and what it refuses with which code. */
import { fileURLToPath } from 'node:url'
import { describe, expect, it, vi } from 'vitest'
import type { RecoveryFit } from '../../../shared/fitting/fit'
import { recoveryCurve } from '../../../shared/fitting/recovery-model'
import { fileWith, run } from './support'

// A busy machine takes seconds to start a process.
vi.setConfig({ testTimeout: 180_000 })

const demo = (name: string) => fileURLToPath(new URL(`../../../scripts/demo-data/${name}`, import.meta.url))
const documentOf = async (options: string[]) => {
  const { code, out, problems } = await run('fit', [...options, '--json'])
  expect([code, problems.includes('Fault')]).toEqual([0, false])
  return JSON.parse(out) as RecoveryFit & { condition: string, fits: RecoveryFit[], bootstrapP: number, cells: Record<string, { parameters: { name: string, value: number }[] }> }
}
const TIMES_MS = [50, 100, 200, 400, 800, 1600, 3200, 6400, 12800, 25600, 51200]
const exact = recoveryCurve([{ name: 'depletion', value: 0.8 }, { name: 'fastShare', value: 0.6 }, { name: 'tauFastS', value: 0.9 }, { name: 'tauSlowS', value: 15 }], TIMES_MS.map(time => time / 1000))
const table = (rows: string[]) => fileWith(['condition,protocol,manipulation,interval_ms,ratio_mean,ratio_sd,ratio_sem,n', ...rows].join('\n'))
const rowsOf = (ratios: number[], condition = 'control') => ratios.map((ratio, i) => `${condition},step,none,${TIMES_MS[i]},${ratio},0.03,0.01,9`)

describe('fit --json', () => {
  it('one and two exponentials of an exact table: names, units, values, nothing in the error stream', async () => {
    const file = table(rowsOf(exact))
    const [one, two] = await Promise.all([documentOf([file, '--model', 'one']), documentOf([file, '--model', 'two'])])
    expect(one.parameters.map(({ name, unit }) => `${name} ${unit}`)).toEqual(['depletion 1', 'tauS s'])
    expect(two.parameters.map(({ name, unit }) => `${name} ${unit}`)).toEqual(['depletion 1', 'fastShare 1', 'tauFastS s', 'tauSlowS s'])
    expect(two).toMatchObject({ condition: 'control', points: 11, model: 'two', weights: 'sem', dof: 7, converged: true })
    ;[0.8, 0.6, 0.9, 15].forEach((truth, i) => expect(two.parameters[i]!.value / truth).toBeCloseTo(1, 6))
    for (const { se, low, high, value } of two.parameters) {
      expect(se).toBeGreaterThan(0)
      expect(low).toBeLessThan(value)
      expect(high).toBeGreaterThan(value)
    }
    expect(one.criterion).toBeCloseTo(one.chi2 / Math.max(1, one.chi2 / one.dof) + 4, 9)
    expect(two.warnings.map(({ code }) => code)).toEqual(['one-curve'])
  })
  it('both: two fits and the bootstrap’s p, the same again; a freed plateau is a parameter more', async () => {
    const options = [demo('summary.csv'), '--model', 'both', '--condition', 'control', '--weights', 'pooled', '--free-plateau', '--resamples', '99']
    const [first, again] = await Promise.all([documentOf(options), documentOf(options)])
    expect(again).toEqual(first)
    expect(first.fits.map(one => [one.model, one.weights, one.parameters.at(-1)!.name])).toEqual([['one', 'pooled', 'plateau'], ['two', 'pooled', 'plateau']])
    expect(first.bootstrapP).toBe(0.01)
  })
  it('a file of cells brings the fits of cells along; a messy export is read as an upload reads it', async () => {
    const [cells, messy] = await Promise.all([documentOf([demo('cells.csv'), '--model', 'two', '--condition', 'control']), documentOf([demo('control_messy.csv'), '--model', 'two'])])
    expect(cells.cells.two!.parameters.map(one => one.name)).toEqual(['depletion', 'fastShare', 'tauFastS', 'tauSlowS'])
    expect(cells.warnings.map(one => one.code)).toContain('same-cells')
    expect(messy).toMatchObject({ points: 11, weights: 'sem', dof: 7 })
    const byCells = await documentOf([demo('cells.csv'), '--model', 'two', '--condition', 'control', '--weights', 'cells'])
    expect(byCells).toMatchObject({ weights: 'cells', dof: 7, betweenCells: { dof: 8 } })
    expect(byCells.warnings.map(one => one.code)).not.toContain('same-cells')
  })
})

describe('without --json', () => {
  it('says the fits in words, warnings in the error stream', async () => {
    const { code, out, problems } = await run('fit', [demo('control_messy.csv'), '--model', 'both', '--resamples', '99'])
    expect(code).toBe(0)
    expect(out).toMatch(/One exponential, 11 points weighted by the SEM of each point: χ² 654\.1 with 9 degrees of freedom/)
    expect(out).toMatch(/fast τ 876.ms|fast τ 0\.876.s/)
    expect(out).toMatch(/none of 99 sets drawn from it would gain as much/)
    expect(problems).toMatch(/^Warning, one exponential: The curve misses the points/m)
  })
})

describe('bad input ends with 2 and says what', () => {
  const two = ['--model', 'two']
  it.each<[string, () => string[], RegExp]>([
    ['a missing file', () => ['nowhere.csv', ...two], /^nowhere\.csv: There is no such file\./],
    ['no file', () => two, /^A recording file is wanted\.\nUsage/],
    ['no model', () => [demo('summary.csv')], /^model: One of one, two, both is wanted/],
    ['an unknown model', () => [demo('summary.csv'), '--model', 'three'], /^model: .*“three” was read/],
    ['unknown weights', () => [demo('summary.csv'), ...two, '--weights', 'n'], /^weights: .*“n” was read/],
    ['an unknown option', () => [demo('summary.csv'), ...two, '--plateau'], /--plateau/],
    ['several conditions', () => [demo('summary.csv'), ...two], /^condition: This file has 4 conditions: “control”, “TP-4 peptide”, “AK-7”, “short”/],
    ['an unknown condition', () => [demo('summary.csv'), ...two, '--condition', 'washout'], /^condition: There is no condition “washout”/],
    ['fewer points than parameters', () => [table(rowsOf(exact.slice(0, 3))), ...two], /^points: .*4 free parameters here, and there are 3 points/],
    ['fewer points than parameters, for both', () => [table(rowsOf(exact.slice(0, 3))), '--model', 'both'], /^points: .*4 free parameters/],
    ['a flat curve', () => [table(rowsOf(exact.map(() => 0.5))), ...two], /^points: .*flat/],
    ['an empty file', () => [fileWith(''), ...two], /no rows/],
    ['a cell that can be read two ways', () => [fileWith('interval_ms;ratio_mean\n1,234;0.5\n2,500;0.6\n'), ...two], /Line 2, “1,234”.*--decimal ","/s],
    ['an interval without unit', () => [fileWith('interval;ratio\n50;0.5\n100;0.6\n200;0.7\n'), ...two], /--time ms/],
  ])('%s', async (_, options, words) => {
    const { code, out, problems } = await run('fit', options())
    expect([code, out]).toEqual([2, ''])
    expect(problems).toMatch(words)
  })
  it('and is settled by the option that it names', async () => {
    const seconds = [1, 2, 4, 8, 16], ratios = recoveryCurve([{ name: 'tauS', value: 3 }], seconds)
    const file = fileWith(['interval_ms;ratio_mean;ratio_sem', ...seconds.map((time, i) => `${time},000;${ratios[i]!.toFixed(4)};0.01`)].join('\n'))
    const [asked, settled] = await Promise.all([run('fit', [file, '--model', 'one']), documentOf([file, '--model', 'one', '--decimal', '.'])])
    expect([asked.code, asked.problems.includes('--decimal')]).toEqual([2, true])
    expect(settled.parameters.find(one => one.name === 'tauS')!.value).toBeCloseTo(3, 2)
  })
})
