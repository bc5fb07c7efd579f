/** Names of columns and units as labs write them. */
import { describe, expect, it } from 'vitest'
import { letterOf, readName, unitWord } from '../../../shared/recordings/names'

describe('names of columns', () => {
  it.each([
    ['dt', 'interval', ''], ['Delta t', 'interval', ''], ['Δt (ms)', 'interval', 'ms'], ['∆t [s]', 'interval', 's'], ['interval', 'interval', ''], ['interval_ms', 'interval', 'ms'], ['Interval / s', 'interval', 's'],
    ['ISI', 'interval', ''], ['ISI (ms)', 'interval', 'ms'], ['inter-stimulus interval', 'interval', ''], ['recovery time (s)', 'interval', 's'], ['time', 'time', ''], ['time_s', 'time', 's'], ['delta_t_ms', 'interval', 'ms'], ['Interval (min)', 'interval', 'min'],
    ['PPR', 'ratio', ''], ['ratio', 'ratio', ''], ['ratio_mean', 'ratio', ''], ['Recovery', 'ratio', ''], ['recovery (%)', 'ratio', '%'], ['Recovery in %', 'ratio', '%'], ['% of control', 'ratio', '%'], ['% recovery', 'ratio', '%'],
    ['Cm2/Cm1', 'ratio', ''], ['EPSC2/EPSC1', 'ratio', ''], ['P2/P1 (%)', 'ratio', '%'], ['paired-pulse ratio', 'ratio', ''], ['%', 'ratio', '%'], ['Intervall (ms)', 'interval', 'ms'], ['Set aside', 'aside', ''],
    ['sd', 'sd', ''], ['S.D.', 'sd', ''], ['ratio_sd', 'sd', ''], ['Std Dev', 'sd', ''], ['sem', 'sem', ''], ['s.e.m.', 'sem', ''], ['SEM (%)', 'sem', '%'], ['SE', 'sem', ''], ['standard error of the mean', 'sem', ''],
    ['95% CI', 'half-width', ''], ['CI95', 'half-width', ''], ['95 % CI half-width', 'half-width', ''], ['lower 95% limit', 'lower-limit', ''], ['ci_low', 'lower-limit', ''], ['95% upper', 'upper-limit', ''], ['UCL', 'upper-limit', ''],
    ['n', 'n', ''], ['N', 'n', ''], ['n cells', 'n', ''], ['cells', 'n', ''], ['number of cells', 'n', ''], ['cell', 'cell', ''], ['Cell ID', 'cell', ''], ['neuron', 'cell', ''],
    ['condition', 'condition', ''], ['Treatment', 'condition', ''], ['protocol', 'protocol', ''], ['manipulation', 'manipulation', ''],
    ['response1_pA', 'first', 'pA'], ['response2_pA', 'second', 'pA'], ['EPSC1 (pA)', 'first', 'pA'], ['Cm2 [fF]', 'second', 'fF'], ['first response', 'first', ''], ['2nd pulse', 'second', ''],
    ['Cm_fF', 'capacitance', 'fF'], ['Vcmd_mV', 'command', 'mV'],
  ])('%j is %s in “%s”', (name, meaning, unit) => {
    expect(readName(name)).toEqual({ meaning, bar: false, unit })
  })
  it.each(['error', 'Err.', '±', 'error bar', 'recovery ± (%)'])('%j is an error that does not say its kind', (name) => {
    expect(readName(name)).toMatchObject({ meaning: null, bar: true })
  })
  it.each(['', 'remark', 'date', 'file', 'low K', 'high Ca', 'Ra', 'temperature', 'constructor', 'number', 'amp', 'control'])('%j says nothing that is known, or no error', (name) => {
    expect(['ratio', 'lower-limit', 'upper-limit', 'sem', 'sd', 'half-width', 'interval', 'first', 'second']).not.toContain(readName(name).meaning)
  })
})

describe('units', () => {
  it.each([['s', 's'], ['[ms]', 'ms'], ['(%)', '%'], ['MSEC', 'ms'], ['pA', 'pA'], ['fF', 'fF'], ['percent', '%'], ['count', 'count']])('%j is %s', (text, unit) => {
    expect(unitWord(text)).toBe(unit)
  })
  it.each(['', '50', 'interval', 'toString'])('%j is none', text => expect(unitWord(text)).toBeNull())
})

describe('letters', () => {
  it('count as spreadsheets do', () => {
    expect([0, 25, 26, 51, 52, 701, 702].map(letterOf)).toEqual(['A', 'Z', 'AA', 'AZ', 'BA', 'ZZ', 'AAA'])
  })
})
