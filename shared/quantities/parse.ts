/** Reads a quantity as a person types or pastes it, by a strict grammar. Never guesses: what has two meanings is asked back. */
import { UNITS, convert, unitFrom, type UnitSymbol } from './symbols'
import { formatForField } from './format'

/** What a text was read as. `value` is always in the unit that was asked for. */
export type Reading
  = | { kind: 'ok', value: number, unit: UnitSymbol, shown: string }
    | { kind: 'ambiguous', sentence: string, readings: [{ value: number, shown: string }, { value: number, shown: string }] }
    | { kind: 'missing', sentence: string }
    | { kind: 'refused', sentence: string }

export interface ParseOptions { decimal?: '.' | ',', settled?: boolean }
const LONGEST = 60 // characters; enough for any number with its unit
const MINUS = /^[\u2212\uFF0D\uFE63\u2010-\u2013]/
const NUMBER = /^([+-]?) ?((?:\d{1,3}(?: \d{3})+(?![\d])|\d{1,3}(?:'\d{3})+(?![\d])|\d+(?:[.,]\d{3})*(?![\d]))(?:[.,]\d*)?|\d+[.,]\d*|\d+|[.,]\d+)([eE][+-]?\d{1,4})?/

const refuse = (sentence: string): Reading => ({ kind: 'refused', sentence })
const quote = (text: string) => `“${text.length > 24 ? `${text.slice(0, 24)}…` : text}”`

/** Full-width forms, the minus family, every blank and every apostrophe to their plain form. Superscripts and fractions are left to be refused: 10² must not become 102. */
function plain(text: string): string {
  return text.replace(/[\uFF10-\uFF19\uFF0B\uFF0C\uFF0E\uFF05\uFF41-\uFF5A\uFF21-\uFF3A\uFF0F]/g, wide => String.fromCharCode(wide.charCodeAt(0) - 0xFEE0))
    .replace(/[\p{Zs}\t]+/gu, ' ').replace(/[\u2019\u02BC\u2018\uFF07]/g, '\'').replace(/\uFEFF/g, '').trim()
    .replace(MINUS, '-').replace(/([eE])[\u2212\u2010-\u2013]/, '$1-')
}

/** What digits and marks stand for once a person has settled the decimal mark: the other mark only groups. */
function settledMeaning(mantissa: string, decimal: '.' | ','): string[] {
  const [whole = '', part, ...more] = mantissa.split(decimal)
  const grouped = /^(?:\d*|[1-9]\d{0,2}(?:([., '])\d{3})(?:\1\d{3})*)$/.test(whole)
  if (more.length > 0 || !grouped || (part !== undefined && !/^\d*$/.test(part))) return []
  return [`${whole.replace(/[., ']/g, '') || '0'}.${part || '0'}`]
}

/** Digits and marks to the texts they may stand for, each fit for a strict conversion; empty when the marks make no number. */
function meanings(mantissa: string, decimal: '.' | ','): string[] {
  const digits = mantissa.replace(/[ ']/g, '')
  if (digits !== mantissa && /^0/.test(mantissa)) return []
  const marks = [...digits.matchAll(/[.,]/g)].map(mark => mark[0])
  if (marks.length === 0) return [digits]
  const last = marks[marks.length - 1]!, head = digits.slice(0, digits.lastIndexOf(last)), tail = digits.slice(digits.lastIndexOf(last) + 1)
  const point = `${head.replace(/[.,]/g, '') || '0'}.${tail || '0'}`
  if (marks.length > 1) {
    if (digits !== mantissa) return [] // blanks and marks as groups at once
    const grouped = /^[1-9]\d{0,2}(?:([.,])\d{3}(?:\1\d{3})*)?$/
    if (new Set(marks).size === 1) return grouped.test(digits) ? [digits.replace(/[.,]/g, '')] : []
    return marks.filter(mark => mark === last).length === 1 && grouped.test(head) ? [point] : []
  }
  const twoWays = last !== decimal && digits === mantissa && /^[1-9]\d{0,2}[.,]\d{3}$/.test(digits)
  return twoWays ? [point, digits.replace(/[.,]/g, '')] : [point]
}

/** A strictly formed text to a number; null when it is too large or vanishes. */
function strict(sign: string, digits: string, exponent: string): number | null {
  const value = Number(`${sign}${digits}${exponent}`)
  if (!Number.isFinite(value) || (value === 0 && /[1-9]/.test(digits))) return null
  return Object.is(value, -0) ? 0 : value
}

/**
 * Reads a quantity. Accepts a decimal comma or point, groups of three (blank, apostrophe, or the other mark), U+2212 and its kin, full-width digits, exponents such as 1e-3, and a unit behind the number.
 * Refuses hexadecimal, infinities, not-a-number, overflow, vanishing exponents, `1.2.3`, anything left over. `1,234` is asked back, unless the comma is declared to be the decimal mark.
 * @param text - as typed or pasted
 * @param unit - the field's unit; the value comes back in it
 * @param options - `decimal`: the mark that the person or the file has declared (default the point); `settled`: the mark is beyond doubt, the other one only groups, and what does not fit is refused
 * @returns one of ok, ambiguous, missing, refused; never throws
 */
export function parseQuantity(text: string, unit: UnitSymbol, options: ParseOptions = {}): Reading {
  const tidy = plain(text)
  if (tidy === '') return { kind: 'missing', sentence: 'A value is missing here.' }
  if (tidy.length > LONGEST) return refuse(`This is longer than ${LONGEST} characters; a number with its unit is wanted here.`)
  const match = NUMBER.exec(tidy)
  if (!match) return refuse(`${quote(tidy)} is not a number.`)
  const [whole, sign = '', mantissa = '', exponent = ''] = match
  const rest = tidy.slice(whole.length).trim()
  const typed = rest === '' ? unit : unitFrom(rest)
  const found = (options.settled ? settledMeaning : meanings)(mantissa, options.decimal ?? '.')
  if (found.length === 0 || (typed === null && /^[\d.,' ]/.test(rest))) return refuse(`${quote(tidy)} is not one number.`)
  if (typed === null) return refuse(`${quote(rest)} after the number is no unit known here; ${quote(unit === '1' ? '%' : unit)} would be.`)
  if (UNITS[typed].dimension !== UNITS[unit].dimension) return refuse(`${typed} is a unit of ${UNITS[typed].dimension}; a ${UNITS[unit].dimension} is wanted here.`)
  const values = found.map(digits => strict(sign, digits, exponent))
  if (values.some(value => value === null)) return refuse(`${quote(tidy)} is beyond the numbers that can be kept.`)
  const read = (values as number[]).map((value) => {
    const inUnit = convert(value, typed, unit)
    return { value: inUnit, shown: formatForField(inUnit, options.decimal) }
  })
  if (read.some(one => !Number.isFinite(one.value))) return refuse(`${quote(tidy)} is beyond the numbers that can be kept.`)
  if (read.length === 1) return { kind: 'ok', value: read[0]!.value, unit: typed, shown: read[0]!.shown }
  return { kind: 'ambiguous', sentence: `${quote(tidy)} can be read as ${read[0]!.shown} or as ${read[1]!.shown}; which is meant?`, readings: [read[0]!, read[1]!] }
}

/**
 * Reads a plain number (a count, a probability) by the same grammar; a per cent sign divides by 100.
 * @param text - as typed or pasted
 * @param options - `decimal`: the declared decimal mark
 * @returns the reading, its value without unit [1]
 */
export function parsePlainNumber(text: string, options: ParseOptions = {}): Reading {
  return parseQuantity(text, '1', options)
}

const PLAIN_POINT = /^-?\d{1,15}(?:\.\d{1,15})?$/, PLAIN_COMMA = /^-?\d{1,15}(?:,\d{1,15})?$/

/**
 * The quick way for millions of plain samples: digits and the declared mark, nothing else. Whatever else a cell holds goes through `parsePlainNumber`.
 * @param text - a cell without blanks around it
 * @param decimal - the declared decimal mark
 * @returns the same value as `parsePlainNumber` [1], or null where the cell is not of this plain form
 */
export function plainDecimal(text: string, decimal: '.' | ','): number | null {
  if (!(decimal === '.' ? PLAIN_POINT : PLAIN_COMMA).test(text)) return null
  const value = Number(decimal === '.' ? text : text.replace(',', '.'))
  return value === 0 ? 0 : value
}

/**
 * What a person probably meant by a probability above 1: `30` is offered as 30 % = 0.30, never silently scaled.
 * @param value - the number as read [1]
 * @returns the offer with its value [1], or null when it makes no sense
 */
export function percentHint(value: number): { sentence: string, value: number } | null {
  if (!(value > 1 && value <= 100)) return null
  return { sentence: `${formatForField(value)} % = ${(value / 100).toFixed(Math.max(2, decimals(value) + 2))}?`, value: value / 100 }
}
const decimals = (value: number) => String(value).split('.')[1]?.length ?? 0
