/** Choices from outside: judged by path, joined answer by answer. */
import { describe, expect, it } from 'vitest'
import { parseChoices, withAnswer, type ReadingChoices } from '../../../shared/recordings/choices'
import { readFixture } from './support'

describe('choices from outside', () => {
  it('are taken as they are', () => {
    const choices: ReadingChoices = {
      encoding: 'windows-1252', separator: ';', decimal: ',', headerLine: null, unitLine: 5, columns: { 0: 'interval', 12: 'ignore' }, timeUnit: 's', ratioScale: 'percent', errorScale: 'ratio', missingN: null,
      zeroError: 'smallest', duplicates: 'merge', runDown: 'corrected', ragged: 'take', fillDown: true, leftOut: { 6: 'bad seal' }, condition: 'control',
      trace: { stimuli: [{ startS: 1, endS: 1.2 }, { startS: 4.4, endS: 4.6 }], skipMs: 100, subtractSlope: true, cell: 'C01' },
    }
    expect(parseChoices(JSON.parse(JSON.stringify(choices)))).toEqual({ ok: true, choices })
  })
  it.each([
    [{ separator: '|' }, 'choices.separator'], [{ columns: { 0: 'weight' } }, 'choices.columns.0'], [{ columns: { x: 'ratio' } }, 'choices.columns.x'], [{ missingN: 2.5 }, 'choices.missingN'],
    [{ trace: { stimuli: [{ startS: 1, endS: 2 }] } }, 'choices.trace.stimuli'], [{ trace: { skipMs: -1 } }, 'choices.trace.skipMs'], [{ decimals: ',' }, 'choices.decimals'], [{ leftOut: { 6: '' } }, 'choices.leftOut.6'], ['x', 'choices'],
  ])('are refused by path: %j', (given, path) => {
    const judged = parseChoices(given)
    expect(judged.ok ? [] : judged.problems.map(one => one.path)).toContain(path)
    if (!judged.ok) for (const { message } of judged.problems) expect(message).toMatch(/\.$/)
  })
  it('take nothing from a column named by the prototype', () => {
    expect(parseChoices(JSON.parse('{"columns":{"__proto__":"ratio"}}'))).toEqual({ ok: true, choices: { columns: {} } })
  })
})

describe('answers', () => {
  it('add to columns, lines and windows, and replace the rest', () => {
    expect(withAnswer({ columns: { 0: 'interval' }, decimal: ',', trace: { skipMs: 50 } }, { columns: { 1: 'ratio' }, decimal: '.', trace: { measureMs: 200 } }))
      .toEqual({ columns: { 0: 'interval', 1: 'ratio' }, decimal: '.', trace: { skipMs: 50, measureMs: 200 } })
    expect(withAnswer({}, { timeUnit: 'ms' })).toEqual({ timeUnit: 'ms' })
  })
  it('that are undefined leave the reading as it was', () => {
    expect(readFixture('control_messy.csv', { decimal: undefined, timeUnit: undefined, columns: undefined, trace: { skipMs: undefined } })).toEqual(readFixture('control_messy.csv'))
  })
  it('give every option of a reading choices that are valid', () => {
    const reading = readFixture('control_messy.csv')
    for (const option of [...reading.guesses, ...reading.questions].flatMap(one => one.options)) expect(parseChoices(option.choices).ok, option.label).toBe(true)
  })
})
