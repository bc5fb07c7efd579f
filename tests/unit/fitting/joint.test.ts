/** Fits of several conditions with shared parameters, and fits of single cells. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { fitCells } from '../../../shared/fitting/cell-fits'
import { fitCondition, fitConditions } from '../../../shared/fitting/fit'
import { normalDeviates } from '../../../shared/fitting/deviates'
import { recoveryCurve, type NamedValue } from '../../../shared/fitting/recovery-model'
import { readBytes } from '../../../shared/recordings/read'
import type { CellPoint, ConditionData } from '../../../shared/recordings/types'
import { conditionOf } from '../../reference/recovery-data'
import { accepted, codesOf, made, refusedOf, streamOf, TIMES_S, valueOf } from './support'

const curve = (depletion: number, fastShare: number, tauFastS: number, tauSlowS: number): NamedValue[] =>
  [{ name: 'depletion', value: depletion }, { name: 'fastShare', value: fastShare }, { name: 'tauFastS', value: tauFastS }, { name: 'tauSlowS', value: tauSlowS }]

/** Untouched under two protocols, and a manipulation that changes the share. */
const THREE: ConditionData[] = [
  made(curve(0.88, 0.6, 0.83, 20), 0.011, undefined, { condition: 'control', protocol: 'long' }),
  made(curve(0.35, 0.6, 0.83, 20), 0.011, undefined, { condition: 'short', protocol: 'short' }),
  made(curve(0.88, 0.2, 0.83, 20), 0.011, undefined, { condition: 'peptide', protocol: 'long', manipulation: 'peptide' }),
]

describe('a joint fit', () => {
  it('shares depletion within a protocol and all else within a manipulation, if nothing else is said', () => {
    const fit = accepted(fitConditions(THREE, { model: 'two' }))
    expect(fit.parameters.map(one => `${one.name} ${one.group}`)).toEqual([
      'depletion long', 'depletion short', 'fastShare none', 'fastShare peptide', 'tauFastS none', 'tauFastS peptide', 'tauSlowS none', 'tauSlowS peptide',
    ])
    expect(fit).toMatchObject({ points: 33, dof: 25, converged: true })
    expect(fit.chi2).toBeLessThan(1e-9)
  })
  it('gives the truth back when both time constants are shared by all', () => {
    const fit = accepted(fitConditions(THREE, { model: 'two', share: { tauFastS: 'all', tauSlowS: 'all' } }))
    expect(fit.parameters).toHaveLength(6)
    for (const [name, group, truth] of [['depletion', 'long', 0.88], ['depletion', 'short', 0.35], ['fastShare', 'none', 0.6], ['fastShare', 'peptide', 0.2], ['tauFastS', null, 0.83], ['tauSlowS', null, 20]] as const)
      expect(valueOf(fit, name, group) / truth).toBeCloseTo(1, 6)
    expect(fit.residuals.map(one => one.condition)).toEqual(['control', 'short', 'peptide'].flatMap(name => TIMES_S.map(() => name)))
  })
  it('with nothing shared is the sum of the single fits, to the digit', () => {
    const stream = streamOf('joint'), noisy = THREE.map(({ condition, protocol, manipulation }, i) => made(curve([0.88, 0.35, 0.88][i]!, [0.6, 0.6, 0.2][i]!, 0.83, 20), 0.011, stream, { condition, protocol, manipulation }))
    const each = 'condition' as const, joint = accepted(fitConditions(noisy, { model: 'two', share: { depletion: each, fastShare: each, tauFastS: each, tauSlowS: each } }))
    const single = noisy.map(one => accepted(fitCondition(one, { model: 'two' })))
    expect(joint.chi2).toBeCloseTo(single.reduce((sum, one) => sum + one.chi2, 0), 7)
    single.forEach((one, i) => expect(valueOf(joint, 'tauFastS', noisy[i]!.condition) / valueOf(one, 'tauFastS')).toBeCloseTo(1, 4))
    expect(joint.dof).toBe(21)
  })
  it('a wrong sharing costs χ²', () => {
    const wrong = accepted(fitConditions(THREE, { model: 'two', share: { fastShare: 'all', tauFastS: 'all', tauSlowS: 'all' } }))
    expect(wrong.chi2).toBeGreaterThan(100)
    expect(codesOf(wrong)).toContain('poor-fit')
  })
  it('a condition without points, or flat, is named', () => {
    const flat = conditionOf(TIMES_S, TIMES_S.map(() => 1), { sem: 0.01 }, { condition: 'washout' })
    const found = fitConditions([...THREE, flat], { model: 'two' })
    expect('refused' in found && found.refused.message).toMatch(/“washout” are 1/)
  })
})

/** Cells whose fast time constant differs (log-normal, CV 20 per cent), each with its own noise. */
function madeCells(count: number, seed: string): ConditionData {
  const stream = streamOf(seed), own = new Float64Array(count), noise = new Float64Array(TIMES_S.length)
  normalDeviates(stream, own)
  const cells = [...own].flatMap((deviate, c) => {
    normalDeviates(stream, noise)
    return recoveryCurve(curve(0.88, 0.6, 0.83 * Math.exp(0.2 * deviate), 20), TIMES_S).map((ratio, i): CellPoint => ({ cell: `C${c}`, intervalMs: TIMES_S[i]! * 1000, ratio: ratio + 0.01 * noise[i]!, first: null, aside: null, line: null }))
  })
  return { condition: 'control', protocol: 'long', manipulation: 'none', points: [], cells }
}

describe('fits of single cells', () => {
  it('mean and spread between cells come back (seeded, 40 cells, 4 standard errors)', () => {
    const { cells, parameters, notes } = accepted(fitCells(madeCells(40, 'forty'), { model: 'two' }))
    expect([cells.length, notes]).toEqual([40, []])
    const fast = parameters.find(one => one.name === 'tauFastS')!
    expect(Math.abs(Math.log(fast.value / 0.83))).toBeLessThan(4 * 0.22 / Math.sqrt(40))
    expect(Math.abs(fast.between! / fast.value / 0.2 - 1)).toBeLessThan(4 / Math.sqrt(80))
    expect(fast.between!).toBeLessThan(fast.sd!)
    expect(fast.low!).toBeLessThan(fast.value)
    // The shares do not differ between cells: what is left of their spread is small against it.
    const share = parameters.find(one => one.name === 'fastShare')!
    expect(share.between!).toBeLessThan(share.sd! / 1.5)
  })
  it('lost intervals are no zeros, and a cell with too few points is left out and told', () => {
    const made = madeCells(6, 'six'), lost = made.cells.map((point, i) => point.cell === 'C0' && i > 2 ? { ...point, ratio: null } : point.cell === 'C1' && i % 4 === 0 ? { ...point, aside: 'seal' } : point)
    const { cells, parameters, notes } = accepted(fitCells({ ...made, cells: lost }, { model: 'two' }))
    expect(cells.map(one => one.points)).toEqual([3, 8, 11, 11, 11, 11])
    expect(cells[0]).toMatchObject({ fit: null, refused: { code: 'too-few-points' } })
    expect(parameters[0]!.cells).toBe(5)
    expect(notes.map(one => one.code)).toEqual(['cells-left-out'])
  })
  it('two cells are too few for a claim, one has no spread, a summary has none', () => {
    expect(accepted(fitCells(madeCells(2, 'two'), { model: 'one' })).notes.map(one => one.code)).toEqual(['few-cells'])
    expect(accepted(fitCells(madeCells(1, 'one'), { model: 'one' })).parameters[0]).toMatchObject({ cells: 1, sd: null, low: null })
    expect(refusedOf(fitCells(THREE[0]!, { model: 'one' }))).toBe('no-cells')
  })
  it('the demo’s control (invented; truth: shares 0.6, 0.83 s, 20 s, depletion 0.88) lies inside the intervals over its cells', () => {
    const read = readBytes(new Uint8Array(readFileSync(new URL('../../../scripts/demo-data/cells.csv', import.meta.url))))
    if (!read.ok) throw new Error(read.problem.message)
    const control = read.reading.conditions.find(one => one.condition === 'control')!
    const { parameters } = accepted(fitCells(control, { model: 'two' }))
    for (const [name, truth] of [['depletion', 0.88], ['fastShare', 0.6], ['tauFastS', 1 / 1.2]] as const) {
      const { low, high } = parameters.find(one => one.name === name)!
      expect(low!).toBeLessThan(truth)
      expect(high!).toBeGreaterThan(truth)
    }
  })
})
