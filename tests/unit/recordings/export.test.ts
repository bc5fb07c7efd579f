/** Tables out: no formula runs, numbers stay numbers, and our own reader gives the same points back. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cellsCsv, neutraliseCell, summaryCsv, toCsv } from '../../../shared/recordings/export'
import { splitRows } from '../../../shared/recordings/rows'
import type { ConditionData } from '../../../shared/recordings/types'
import { read, readFixture } from './support'

describe('cells of text', () => {
  it.each(['=1+2', '+1', '-1', '@SUM(A1)', '\t=1', '  =1', '\r=1', '＝1', '－2', '=HYPERLINK("x")'])('that begin a formula get an apostrophe: %j', (text) => {
    expect(neutraliseCell(text)).toBe(`'${text}`)
  })
  it.each(['control', '200 ms step', 'TP-4 peptide', 'a=b', '', '\'quoted'])('that do not stay as they are: %j', text => expect(neutraliseCell(text)).toBe(text))
  it('never begin one in a file, whatever they hold', () => {
    fc.assert(fc.property(fc.array(fc.string({ unit: fc.constantFrom(...'=+-@a1",;\t\n '), maxLength: 6 }), { minLength: 2, maxLength: 4 }), (cells) => {
      const { rows } = splitRows(toCsv([cells]), ',')
      expect(rows).toHaveLength(1)
      for (const cell of rows[0]!.cells) expect(cell).not.toMatch(/^[\s]*[=+\-@]/)
      expect(rows[0]!.cells.map(cell => cell.replace(/^'(?=\s*[=+\-@]|[\t\n])/, ''))).toEqual(cells)
    }), { numRuns: 500 })
  })
})

describe('numbers', () => {
  it('are written with a point and every digit, a negative one without apostrophe, null as nothing', () => {
    expect(toCsv([['interval_ms', 'ratio'], [50, -0.02], [0.1 + 0.2, null]])).toBe('interval_ms,ratio\r\n50,-0.02\r\n0.30000000000000004,\r\n')
  })
})

describe('round trips', () => {
  const withoutLines = (conditions: ConditionData[]) => conditions.map(one => ({ ...one, points: one.points.map(point => ({ ...point, line: null })), cells: one.cells.map(cell => ({ ...cell, line: null })) }))
  it('of means give the same conditions', () => {
    const { conditions } = readFixture('summary.csv'), again = read(summaryCsv(conditions))
    expect(again.questions).toEqual([])
    expect(withoutLines(again.conditions)).toEqual(withoutLines(conditions))
  })
  it('of cells give the same conditions, lost ones included', () => {
    const { conditions } = readFixture('cells.csv'), again = read(cellsCsv(conditions))
    expect(again.counts).toEqual(readFixture('cells.csv').counts)
    expect(withoutLines(again.conditions)).toEqual(withoutLines(conditions))
  })
  it('keep what is set aside, and names that look like formulas', () => {
    const [control] = readFixture('summary.csv').conditions
    const odd = [{ ...control!, condition: '=1+2', points: control!.points.map((point, i) => i === 3 ? { ...point, aside: 'bad, "noisy" seal' } : point) }]
    expect(withoutLines(read(summaryCsv(odd)).conditions)).toEqual(withoutLines(odd))
    expect(summaryCsv(odd)).toContain('\'=1+2')
  })
})
