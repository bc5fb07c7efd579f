/** What must hold of any cell and any text: numbers come back exactly, rubbish never becomes 0 or NaN, nothing is dropped in silence. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { markEvidence, missingSpelling, readCell, spreadsheetDate } from '../../../shared/recordings/cells'
import { readRecording } from '../../../shared/recordings/read'
import { splitRows, withFeeds } from '../../../shared/recordings/rows'
import { parsePlainNumber, plainDecimal } from '../../../shared/units'
import { bytesOf } from './support'
import { decodeBytes } from '../../../shared/recordings/decode'

const decimalMark = fc.constantFrom('.' as const, ',' as const)
const group = fc.constantFrom('', ' ', '\u00A0', '\u202F', '\'', 'other' as const)
const minus = fc.constantFrom('-', '\u2212')
const number = fc.tuple(fc.integer({ min: -9_999_999, max: 9_999_999 }), fc.integer({ min: 0, max: 4 }))

/** A number as some rig writes it. */
function written(whole: number, decimals: number, mark: '.' | ',', grouping: string, sign: string): string {
  const digits = String(Math.abs(whole)).padStart(decimals + 1, '0'), cut = digits.length - decimals
  const between = grouping === 'other' ? (mark === '.' ? ',' : '.') : grouping
  const head = digits.slice(0, cut).replace(/\B(?=(\d{3})+$)/g, between)
  return `${whole < 0 ? sign : ''}${head}${decimals > 0 ? mark + digits.slice(cut) : ''}`
}

describe('a number in a cell', () => {
  it('comes back exactly under a settled mark, with any grouping and any minus', () => {
    fc.assert(fc.property(number, decimalMark, group, minus, ([whole, decimals], mark, grouping, sign) => {
      const read = readCell(written(whole, decimals, mark, grouping, sign), mark, true, '1')
      expect(read).toMatchObject({ kind: 'ok', value: whole === 0 ? 0 : Number(`${whole}e-${decimals}`) })
    }), { numRuns: 2000 })
  })
  it('is the same number or a question where the mark is only guessed, never another number', () => {
    fc.assert(fc.property(number, decimalMark, ([whole, decimals], mark) => {
      const read = readCell(written(whole, decimals, mark, '', '-'), mark, false, '1')
      if (read.kind === 'ok') expect(read.value).toBe(whole === 0 ? 0 : Number(`${whole}e-${decimals}`))
      else expect(read.kind).toBe('ambiguous')
    }), { numRuns: 2000 })
  })
  it('never speaks for the wrong decimal mark', () => {
    fc.assert(fc.property(number, decimalMark, ([whole, decimals], mark) => {
      expect(decimals === 0 ? ['none'] : [mark, 'both']).toContain(markEvidence(written(whole, decimals, mark, '', '-')))
    }), { numRuns: 1000 })
  })
  it('speaks for the marks that the parser itself takes', () => {
    fc.assert(fc.property(fc.string({ unit: fc.constantFrom(...'0123456789.,-'), maxLength: 9 }), (text) => {
      const point = parsePlainNumber(text, { decimal: '.', settled: true }), comma = parsePlainNumber(text, { decimal: ',', settled: true })
      const both = point.kind === 'ok' && comma.kind === 'ok' ? (point.value === comma.value ? 'none' : 'both') : null
      expect(markEvidence(text)).toBe(both ?? (point.kind === 'ok' ? '.' : comma.kind === 'ok' ? ',' : 'no-number'))
    }), { numRuns: 3000 })
  })
  it('is never NaN, and 0 only where a zero stands', () => {
    fc.assert(fc.property(fc.oneof(fc.string(), fc.string({ unit: fc.constantFrom(...'0123456789.,-+eE\'% xINFnaN\u2212\u202F#/') })), decimalMark, fc.boolean(), (text, mark, settled) => {
      const read = readCell(text, mark, settled, '1')
      if (read.kind !== 'ok') return
      expect(Number.isFinite(read.value)).toBe(true)
      if (read.value === 0) expect(text.normalize('NFKC')).toMatch(/^[^1-9]*0[^1-9]*(?:[eE].*)?$/)
    }), { numRuns: 3000 })
  })
  it('multiplies into ms and per cent without stray digits', () => {
    expect(['0.07', '0.057', '1.1', '12.8'].map(text => readCell(text, '.', false, 's', 'ms'))).toMatchObject([{ value: 70 }, { value: 57 }, { value: 1100 }, { value: 12800 }])
    fc.assert(fc.property(fc.integer({ min: 0, max: 999_999 }), (thousandths) => {
      expect(readCell(`${thousandths}e-3`, '.', true, 's', 'ms')).toMatchObject({ value: thousandths })
    }))
  })
  it('takes the quick way to the same value', () => {
    fc.assert(fc.property(fc.oneof(fc.string({ unit: fc.constantFrom(...'0123456789.,-+e \u2212'), maxLength: 18 }), fc.tuple(number, decimalMark).map(([[whole, decimals], mark]) => written(whole, decimals, mark, '', '-'))), decimalMark, (text, decimal) => {
      const quick = plainDecimal(text, decimal)
      if (quick !== null) expect(parsePlainNumber(text, { decimal })).toMatchObject({ kind: 'ok', value: quick })
    }), { numRuns: 3000 })
    expect([plainDecimal('5200.813', '.'), plainDecimal('-0,5', ','), plainDecimal('-0', '.'), plainDecimal('', '.'), plainDecimal('1,234', '.')]).toEqual([5200.813, -0.5, 0, null, null])
  })
  it('is missing, a date or a number, one at a time', () => {
    fc.assert(fc.property(fc.string({ maxLength: 12 }), (text) => {
      if (missingSpelling(text) !== null) expect(spreadsheetDate(text)).toBeNull()
      if (spreadsheetDate(text) !== null) expect(readCell(text, '.', false, '1').kind).toBe('refused')
    }), { numRuns: 1000 })
  })
})

describe('rows', () => {
  const cell = fc.string({ unit: fc.constantFrom(...'ab1;,\t"\n .'), maxLength: 6 })
  it('give back every quoted cell, with the line that each begins on', () => {
    fc.assert(fc.property(fc.array(fc.array(cell, { minLength: 2, maxLength: 4 }), { minLength: 1, maxLength: 6 }), fc.constantFrom(',' as const, ';' as const, '\t' as const), fc.constantFrom('\n', '\r\n', '\r'), (rows, separator, end) => {
      const text = rows.map(cells => cells.map(one => `"${one.replaceAll('"', '""')}"`).join(separator)).join(end)
      const split = splitRows(text, separator)
      expect(split.rows.map(row => row.cells)).toEqual(rows)
      let line = 1
      for (const [i, cells] of rows.entries()) {
        expect(split.rows[i]!.line).toBe(line)
        line += 1 + cells.join('').split('\n').length - 1
      }
      expect(split.unclosed).toBeNull()
    }), { numRuns: 500 })
  })
})

describe('any text', () => {
  it('is read without a throw, every row of it told of', () => {
    const line = fc.string({ unit: fc.constantFrom(...'0123456789.,;\t-"% nairtose\u2212'), maxLength: 24 })
    fc.assert(fc.property(fc.array(line, { minLength: 1, maxLength: 14 }), fc.constantFrom('', 'interval_ms;ratio;sem;n\n', 'condition,cell,dt (s),ppr\n'), (lines, header) => {
      const text = header + lines.join('\n'), reading = readRecording(text)
      expect(reading.fileLines).toBe(withFeeds(text).replace(/\n$/, '').split('\n').length)
      if (reading.problems.length > 0 && reading.conditions.length === 0) return
      const kept = reading.lines.filter(one => one.kept !== null).length
      expect(reading.lines.filter(one => one.kind !== 'header' && one.kind !== 'open' && one.kept === null)).toHaveLength(reading.setAside.length)
      expect(reading.counts.reduce((sum, one) => sum + one.rows, 0)).toBe(kept)
      for (const point of reading.conditions.flatMap(one => one.points)) expect([point.intervalMs, point.ratio].every(Number.isFinite)).toBe(true)
      expect(JSON.parse(JSON.stringify(reading))).toEqual(reading)
    }), { numRuns: 400 })
  })
  it('is decoded without a throw, whatever its bytes', () => {
    fc.assert(fc.property(fc.uint8Array({ maxLength: 60 }), (bytes) => {
      const outcome = decodeBytes(bytes)
      if (outcome.ok) expect(outcome.decoded.text.length).toBeGreaterThan(0)
      else expect(outcome.problem.message).toMatch(/^[A-Z].*\.$/)
    }), { numRuns: 500 })
    fc.assert(fc.property(fc.string({ unit: 'grapheme', minLength: 1 }).filter(text => text.trim() !== '' && !text.includes('\0')), (text) => {
      const outcome = decodeBytes(bytesOf(`1,${text}`))
      expect(outcome.ok && outcome.decoded).toMatchObject({ text: `1,${text}`, encoding: 'utf-8', sure: 'certain' })
    }))
  })
})
