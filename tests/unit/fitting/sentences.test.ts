/** Fits in words: numbers with unit and interval, open ends said, nothing on a bound shown as a result. */
import { describe, expect, it } from 'vitest'
import { fitCondition, fitConditions } from '../../../shared/fitting/fit'
import { fitBoth } from '../../../shared/fitting/fit-both'
import { fitParameterText, fitText, secondNeededText } from '../../../shared/fitting/fit-sentences'
import { recoveryCurve } from '../../../shared/fitting/recovery-model'
import { conditionOf, CONTROL } from '../../reference/recovery-data'
import { accepted, made, TIMES_S } from './support'

const plain = (text: string) => text.replaceAll('\u00A0', ' ')

describe('a fit in words', () => {
  it('one line for the fit, one for each parameter', () => {
    const lines = fitText(accepted(fitCondition(CONTROL, { model: 'two', weights: 'pooled' }))).map(plain)
    expect(lines[0]).toMatch(/^Two exponentials, 11 points weighted by √n over one pooled SD \(0\.0363\): χ² 2\.681 with 7 degrees of freedom, criterion 10\.68\.$/)
    expect(lines[3]).toMatch(/^ {2}fast τ 0\.86\d s \(95 % interval 0\.7\d to 1\.0\d s\)$/)
    expect(lines).toHaveLength(5)
  })
  it('a time below a second in ms, in one unit with its interval', () => {
    expect(plain(fitParameterText({ name: 'tauS', unit: 's', value: 0.0123, se: 0.001, low: 0.0103, high: 0.0145, atBound: false, group: null }))).toBe('τ 12.3 ms (95 % interval 10 to 15 ms)')
    expect(plain(fitParameterText({ name: 'tauS', unit: 's', value: 0.8, se: 0.2, low: 0.5, high: 1.4, atBound: false, group: 'peptide' }))).toMatch(/^τ \(peptide\) 0\.800 s \(95 % interval 0\.5 to 1\.4 s\)$/)
  })
  it('open ends and bounds are said, and the fit is then no result', () => {
    const over = conditionOf(TIMES_S, recoveryCurve([{ name: 'depletion', value: 1.3 }, { name: 'tauS', value: 1 }], TIMES_S), { sem: 0.02 })
    const lines = fitText(accepted(fitCondition(over, { model: 'one' }))).map(plain)
    expect(lines[1]).toMatch(/^ {2}depletion: on its bound, 1\.00; above 0\.\d+, open at the top$/)
    expect(lines.at(-1)).toMatch(/These values are no result/)
    expect(plain(fitParameterText({ name: 'fastShare', unit: '1', value: 0.2, se: null, low: null, high: 0.4, atBound: false, group: null }))).toBe('fast share 0.200 (below 0.400, open at the bottom)')
  })
  it('the plain sum and AICc without weights; groups in a joint fit', () => {
    expect(plain(fitText(accepted(fitCondition(CONTROL, { model: 'one', weights: 'none' })))[0]!)).toMatch(/without weights: residual sum of squares 0\.0\d+ with 9 degrees of freedom, AICc −\d/)
    const joint = accepted(fitConditions([CONTROL, { ...CONTROL, condition: 'drug', manipulation: 'drug' }], { model: 'one' }))
    expect(fitText(joint).map(plain).filter(line => /τ \((none|drug)\)/.test(line))).toHaveLength(2)
  })
  it('the bootstrap as counts of sets', () => {
    const both = accepted(fitBoth([made([{ name: 'tauS', value: 1 }], 0.02)], {}, { resamples: 99 }))
    expect(plain(secondNeededText(both))).toBe('If one exponential were true, 99 of 99 sets drawn from it would gain as much from a second one (p 1.00, seed “one or two”).')
    expect(secondNeededText({ bootstrap: null })).toBe('')
  })
})
