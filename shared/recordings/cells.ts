/** One cell of a table: nothing, a number, a date that a spreadsheet made of a number, or something else. */
import { UNITS, convert, parsePlainNumber, parseQuantity, plainDecimal, type UnitSymbol } from '../units'
import type { Decimal } from './reading'

/** Spellings that stand for no value (common practice, no source). */
const MISSING = new Set(['', 'na', 'n/a', 'n.a.', 'nan', 'null', '-', '--', '---', '\u2012', '\u2013', '\u2014', '\u2212', '.', '?',
  '#n/a', '#nv', '#div/0!', '#value!', '#wert!', '#ref!', '#bezug!', '#num!', '#zahl!', '#null!', '#name?'])
/** A longer cell is text: nothing is searched for in it [characters]. */
const LONGEST = 80
const MONTHS = ['jan', 'feb', 'mar|mär|mrz', 'apr', 'may|mai', 'jun', 'jul', 'aug', 'sep', 'oct|okt', 'nov', 'dec|dez']
const MONTH = MONTHS.join('|')
/** The plain forms of nearly all cells, judged without the parser: no mark, or one with digits on both sides. */
const PLAIN = /^[+-]?(\d{1,15})(?:([.,])(\d{1,15}))?$/

/** The spelling of a missing value, as it is counted; null where the cell holds something. */
export function missingSpelling(cell: string): string | null {
  const tidy = cell.trim()
  if (tidy.length > 8) return null
  return MISSING.has(tidy.toLowerCase()) ? tidy || 'empty' : null
}

const monthOf = (name: string) => 1 + MONTHS.findIndex(names => names.split('|').some(one => name.toLowerCase().startsWith(one)))

/**
 * A date that a spreadsheet made of a number, with the number that it may have been.
 * @param cell - `03.Dez`, `12/3`, `3-Dec`, `Mrz 12`, `2024-03-12`, `3.12.2024`
 * @returns what was perhaps typed (empty where that cannot be told), or null where it is no date
 */
export function spreadsheetDate(cell: string): { perhaps: string } | null {
  const tidy = cell.trim().toLowerCase()
  if (tidy.length > 24) return null
  const dayFirst = new RegExp(`^(\\d{1,2})[.\\-/ ]{1,2}(${MONTH})[a-zäé]*\\.?(?:[.\\-/ ]+\\d{2,4})?$`).exec(tidy)
  if (dayFirst) return { perhaps: `${dayFirst[1]!.replace(/^0(?=\d)/, '')}.${monthOf(dayFirst[2]!)}` }
  const monthFirst = new RegExp(`^(${MONTH})[a-zäé]*\\.?[.\\-/ ]+(\\d{1,4})$`).exec(tidy)
  if (monthFirst) return { perhaps: `${monthOf(monthFirst[1]!)}.${monthFirst[2]}` }
  const slashed = /^(\d{1,2})\/(\d{1,2})$/.exec(tidy)
  if (slashed) return { perhaps: `${slashed[1]}.${slashed[2]}` }
  return /^(?:\d{1,4}[/-]\d{1,2}[/-]\d{1,4}|\d{1,2}\.\d{1,2}\.\d{4})(?: \d{1,2}:\d{2}(?::\d{2})?)?$/.test(tidy) ? { perhaps: '' } : null
}

/** What a cell says of the decimal mark: `both` where a number can be read in two ways, `none` where no mark speaks. */
export type MarkEvidence = '.' | ',' | 'both' | 'none' | 'no-number'

/** Which decimal marks a cell allows. */
export function markEvidence(cell: string): MarkEvidence {
  if (cell.length > LONGEST) return 'no-number'
  const plain = PLAIN.exec(cell)
  if (plain) return plain[2] === undefined ? 'none' : plain[3]!.length === 3 && /^[1-9]\d{0,2}$/.test(plain[1]!) ? 'both' : plain[2] as Decimal
  // A unit behind the number says nothing of its mark.
  const bare = cell.replace(/\s*(?:%|ms|msec|s|sec|min|[µμu]s|[pn]A|[fp]F|mV)\s*$/, '')
  const read = (decimal: Decimal) => parsePlainNumber(bare, { decimal, settled: true })
  const point = read('.'), comma = read(',')
  if (point.kind === 'ok' && comma.kind === 'ok') return point.value === comma.value ? 'none' : 'both'
  if (point.kind === 'ok') return '.'
  return comma.kind === 'ok' ? ',' : 'no-number'
}

/** Whether a cell is a number under some decimal mark, or stands for a missing one. */
export const numberLike = (cell: string): boolean => markEvidence(cell.trim()) !== 'no-number'

/** `rounding`: half a unit of the last digit as written, in the unit wanted. */
export type CellRead = { kind: 'ok', value: number, rounding: number, ownUnit: boolean } | { kind: 'missing', spelling: string } | { kind: 'refused', sentence: string } | { kind: 'ambiguous' }

/** A product with a power of ten to 15 digits: 0.07 s are 70 ms, not 70.00000000000001. */
const tidied = (value: number) => Number(value.toPrecision(15))

function roundingOf(cell: string, decimal: Decimal): number {
  const [mantissa = '', exponent] = cell.trim().toLowerCase().split('e')
  if (exponent !== undefined && /^[+-]?\d/.test(exponent)) return 0
  return 0.5 * 10 ** -/^\d*/.exec(mantissa.split(decimal)[1] ?? '')![0].length
}

/**
 * Reads a cell as a number in a unit.
 * @param cell - as in the file
 * @param decimal - the file's decimal mark
 * @param settled - a person or the file settled the mark: the other one only groups
 * @param unit - unit of the column; a unit in the cell itself wins
 * @param into - unit wanted
 * @returns the value in `into`, or why there is none; never NaN, and 0 only where a zero stands
 */
export function readCell(cell: string, decimal: Decimal, settled: boolean, unit: UnitSymbol, into: UnitSymbol = unit): CellRead {
  const plain = plainDecimal(cell, decimal)
  if (plain !== null) return { kind: 'ok', value: tidied(convert(plain, unit, into)), rounding: roundingOf(cell, decimal) * UNITS[unit].inBase / UNITS[into].inBase, ownUnit: false }
  if (cell.trim().length > LONGEST) return { kind: 'refused', sentence: `“${cell.trim().slice(0, 24)}…” is not a number.` }
  const spelling = missingSpelling(cell)
  if (spelling !== null) return { kind: 'missing', spelling }
  const date = spreadsheetDate(cell)
  if (date) return { kind: 'refused', sentence: `“${cell.trim()}” looks like a date made by a spreadsheet${date.perhaps ? `, perhaps ${date.perhaps}` : ''}.` }
  const read = parseQuantity(cell, unit, { decimal, settled })
  if (read.kind === 'ambiguous') return { kind: 'ambiguous' }
  if (read.kind !== 'ok') return { kind: 'refused', sentence: read.sentence }
  const rounding = roundingOf(cell, decimal) * UNITS[read.unit].inBase / UNITS[into].inBase
  return { kind: 'ok', value: tidied(convert(read.value, unit, into)), rounding, ownUnit: /[%a-z]\s*$/i.test(cell) }
}
