/** Reading and writing quantities: the traps of spreadsheets and keyboards, and round trips in every style. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { UNITS, convert, formatForField, formatInterval, formatNumber, formatQuantity, formatTime, formatWithError, parsePlainNumber, parseQuantity, percentHint, unitFrom, type UnitSymbol } from '../../shared/units'

const value = (text: string, unit: UnitSymbol = '1', options?: { decimal?: '.' | ',', settled?: boolean }) => {
  const reading = parseQuantity(text, unit, options)
  return reading.kind === 'ok' ? reading.value : reading.kind
}

describe('parseQuantity', () => {
  it.each([
    ['0.83', 0.83], ['0,83', 0.83], ['.5', 0.5], [',5', 0.5], ['5.', 5], ['12,8', 12.8], ['1e-3', 1e-3], ['1,5E-3', 1.5e-3], ['1e−3', 1e-3],
    ['−5', -5], ['+5', 5], ['- 5', -5], ['–5', -5], ['−0', 0], ['007', 7], ['  42 ', 42], ['\uFEFF42', 42],
    ['1 234', 1234], ['1 234,5', 1234.5], ['1\u202F234\u202F567,8', 1234567.8], ['1\u00A0234.5', 1234.5], ['1\u2009234', 1234],
    ['1\'234\'567', 1234567], ['1’234.5', 1234.5], ['1,234.5', 1234.5], ['1.234,5', 1234.5], ['1,234,567', 1234567], ['1.234.567', 1234567], ['1,234,567.89', 1234567.89],
    ['１２．５', 12.5], ['－３', -3], ['1234,567', 1234.567], ['0,123', 0.123], ['1.234', 1.234], ['1.2345', 1.2345], ['12,3456', 12.3456],
  ])('reads %j as %s', (text, expected) => expect(value(text)).toBe(expected))

  it.each(['', ' ', '\u00A0\t', '\uFEFF'])('calls %j missing, never 0', text => expect(value(text)).toBe('missing'))
  it.each([
    '0x10', '0b1', '0o7', 'Infinity', '-Infinity', 'NaN', '1e400', '1e-400', '-1e999', '1.2.3', '5;', '1;2', '12 34', '1 2345', '1,23,456', '0,123,456', '0 123',
    '1,234.567,8', '1 234.567.890', '1 234\'567', '10²', '½', '1½', '5-10', '5-', '--5', '+-5', '5e', '1e', '1_000', '12/3', '03.Dez', '1,234,5', 'abc', '٣', '1\n234', '5 furlongs', '9'.repeat(61),
  ])('refuses %j', text => expect(value(text)).toBe('refused'))

  it('asks back what has two meanings, and takes a declared mark', () => {
    expect(parseQuantity('1,234', '1/µm³')).toMatchObject({ kind: 'ambiguous', readings: [{ value: 1.234 }, { value: 1234 }] })
    expect(parseQuantity('-12,345 ms', 's')).toMatchObject({ kind: 'ambiguous', readings: [{ value: -0.012345 }, { value: -12.345 }] })
    expect(value('1,234', '1', { decimal: ',' })).toBe(1.234)
    expect(value('1.234', '1', { decimal: ',' })).toBe('ambiguous')
    expect(value('1,234', '1', { decimal: '.' })).toBe('ambiguous')
  })
  it.each([
    ['1,234', '.', 1234], ['1,234', ',', 1.234], ['1.234', '.', 1.234], ['1.234', ',', 1234], ['12,8', ',', 12.8], ['12,8', '.', 'refused'], ['0,125', '.', 'refused'],
    ['0.150', ',', 'refused'], ['1,234.5', '.', 1234.5], ['1,234.5', ',', 'refused'], ['1.234,5', ',', 1234.5], ['1,234,567', '.', 1234567], ['1,234,567', ',', 'refused'],
    ['1 234,5', ',', 1234.5], ['1\u202F234', '.', 1234], ['1\'234.5', '.', 1234.5], ['−3,5', ',', -3.5], ['.5', '.', 0.5], ['5.', '.', 5], ['42', ',', 42], ['1e-3', ',', 1e-3],
  ] as const)('reads %j as %s once the mark %s is settled', (text, decimal, expected) => {
    expect(value(text, '1', { decimal, settled: true })).toBe(expected)
  })
  it('reads units and converts to the field\'s own', () => {
    expect(value('0.05 um', 'nm')).toBe(50)
    expect(value('50 nm', 'µm')).toBe(0.05)
    expect(value('50', 'nm')).toBe(50)
    for (const micro of ['\u00B5m', '\u03BCm', 'um', '㎛']) expect(value(`0,05 ${micro}`, 'nm')).toBe(50)
    expect(value('20ms', 's')).toBe(0.02)
    expect(value('30 %')).toBe(0.3)
    expect(value('30％')).toBe(0.3)
    for (const rate of ['5 /s', '5 1/s', '5 s⁻¹', '5 s^-1', '5 Hz', '0.005 /ms']) expect(value(rate, '1/s')).toBe(5)
    for (const density of ['800 /µm³', '800 um^-3', '800 1/um3', '800 per µm³']) expect(value(density, '1/µm³')).toBe(800)
    for (const diffusion of ['0.1 µm²/s', '0.1 um2/s', '0.1 µm² s⁻¹', '100 nm²/ms', '1e-9 cm²/s']) expect(value(diffusion, 'µm²/s')).toBeCloseTo(0.1, 15)
    expect(value('22 ℃', '°C')).toBe(22)
  })
  it('refuses a unit of another kind, and capitals that mean another unit', () => {
    expect(parseQuantity('5 s', 'nm')).toMatchObject({ kind: 'refused', sentence: 's is a unit of time; a length is wanted here.' })
    for (const text of ['5 NM', '5 Ms', '5 S', '5 Mm']) expect(value(text, 'nm')).toBe('refused')
    expect(unitFrom('constructor')).toBeNull()
  })
  it('offers a per cent for a probability above 1, and scales nothing by itself', () => {
    expect(parsePlainNumber('30')).toMatchObject({ kind: 'ok', value: 30 })
    expect(percentHint(30)).toEqual({ sentence: '30 % = 0.30?', value: 0.3 })
    expect(percentHint(2.5)).toEqual({ sentence: '2.5 % = 0.025?', value: 0.025 })
    expect(percentHint(0.3)).toBeNull()
    expect(percentHint(130)).toBeNull()
  })
})

describe('properties', () => {
  const finite = fc.double({ noNaN: true, noDefaultInfinity: true })
  const units = Object.keys(UNITS) as UnitSymbol[]

  it('never throws, and answers one of four kinds, on any text', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary', maxLength: 80 }), fc.constantFrom(...units), (text, unit) => {
      expect(['ok', 'ambiguous', 'missing', 'refused']).toContain(parseQuantity(text, unit).kind)
    }), { numRuns: 3000 })
    fc.assert(fc.property(fc.stringMatching(/^[0-9eE+\-., '%µnms/\u202F\u2212]{0,20}$/), (text) => {
      const reading = parseQuantity(text, '1')
      if (reading.kind === 'ok') expect(Number.isFinite(reading.value)).toBe(true)
    }), { numRuns: 5000 })
  })
  it('reads its own field text back to the last bit, under both marks', () => {
    fc.assert(fc.property(finite, fc.constantFrom('.' as const, ',' as const), (number, decimal) => {
      expect(value(formatForField(number, decimal), 'µm', { decimal })).toBe(number === 0 ? 0 : number)
    }), { numRuns: 5000 })
  })
  it.each([['en-US', '.'], ['en-IN', '.'], ['de-DE', ','], ['de-CH', '.'], ['fr-FR', ','], ['sv-SE', ','], ['pl-PL', ','], ['es-ES', ','], ['pt-BR', ','], ['fi-FI', ','], ['ja-JP', '.']] as const)('never silently misreads the style of %s', (locale, decimal) => {
    const writer = new Intl.NumberFormat(locale, { maximumFractionDigits: 6 })
    let understood = 0
    fc.assert(fc.property(fc.integer({ min: -2_000_000_000, max: 2_000_000_000 }), fc.integer({ min: 0, max: 6 }), (digits, places) => {
      const number = Number(`${digits}e-${places}`)
      const reading = parseQuantity(writer.format(number), '1', { decimal })
      if (reading.kind === 'ok') {
        understood++
        expect(reading.value).toBe(number === 0 ? 0 : number)
      } else if (reading.kind === 'ambiguous') expect(reading.readings.map(one => one.value)).toContain(number)
      else expect(locale).toBe('en-IN') // 12,34,567: refused, not misread
    }), { numRuns: 2000, seed: 20261201 })
    expect(understood).toBeGreaterThan(locale === 'en-IN' ? 500 : 1000)
  })
  it('reads display text back within its rounding, minus sign and narrow groups included', () => {
    fc.assert(fc.property(fc.double({ min: -1e8, max: 1e8, noNaN: true }), fc.constantFrom('.' as const, ',' as const), (number, decimal) => {
      const back = value(formatNumber(number, { decimal }), '1', { decimal })
      expect(typeof back).toBe('number')
      expect(Math.abs((back as number) - number)).toBeLessThanOrEqual(0.00501 * Math.abs(number))
    }), { numRuns: 3000 })
  })
  it('converts there and back', () => {
    fc.assert(fc.property(fc.double({ min: 1e-6, max: 1e6, noNaN: true }), fc.constantFrom(...units), fc.constantFrom(...units), (number, from, to) => {
      if (UNITS[from].dimension !== UNITS[to].dimension) expect(() => convert(number, from, to)).toThrow(RangeError)
      else expect(convert(convert(number, from, to), to, from) / number).toBeCloseTo(1, 14)
    }))
  })
})

describe('writing', () => {
  it('rounds value and error together', () => {
    expect(formatWithError(0.83123, 0.0123)).toBe('0.831 ± 0.012')
    expect(formatWithError(1.1267, 0.05)).toBe('1.13 ± 0.05')
    expect(formatWithError(-1234.4, 31)).toBe('−1230 ± 30')
    expect(formatWithError(0.5, 0.0996)).toBe('0.50 ± 0.10')
    expect(formatWithError(0.5, 0)).toBe('0.500')
    expect(formatWithError(0.83, 0.01, { decimal: ',' })).toBe('0,830 ± 0,010')
  })
  it('rounds an interval by its width', () => {
    expect(formatInterval(1.1012, 1.1534)).toBe('1.10 to 1.15')
    expect(formatInterval(0.979, 1.031)).toBe('0.98 to 1.03')
    expect(formatInterval(-0.2, 0.31)).toBe('−0.2 to 0.3')
    expect(formatInterval(12345.2, 12391)).toBe('12\u202F350 to 12\u202F390')
  })
  it('chooses the unit of a time', () => {
    expect(formatTime(0.0833)).toBe('83.3\u00A0ms')
    expect(formatTime(1.667)).toBe('1.67\u00A0s')
    expect(formatTime(0.99999)).toBe('1.00\u00A0s')
    expect(formatTime(0)).toBe('0\u00A0s')
    expect(formatTime(5e-5)).toBe('50.0\u00A0µs')
  })
  it('keeps significant digits, groups from five digits, and uses U+2212', () => {
    expect(formatNumber(576)).toBe('576')
    expect(formatNumber(9999.6)).toBe('10\u202F000')
    expect(formatNumber(1086.2)).toBe('1086')
    expect(formatNumber(-0.01)).toBe('−0.0100')
    expect(formatNumber(1.5e-7)).toBe('1.50e−7')
    expect(formatNumber(Number.NaN)).toBe('–')
    expect(formatQuantity(0.1, 'µm²/s')).toBe('0.100\u00A0µm²/s')
    expect(formatQuantity(48, 'count')).toBe('48')
    expect(formatQuantity(0.45, '1')).toBe('0.450')
  })
})
