/** Tables out: separated text that no spreadsheet runs, that says its decimal mark, and that reads back to the same points. */
import Papa from 'papaparse'
import { formatForField } from '../units'
import type { ConditionData } from './types'

/** What stands beside every download. */
export const CSV_STATEMENT = 'Comma between cells, point as decimal mark, UTF-8, CR LF. A cell of text that begins with =, +, - or @ has an apostrophe before it, so that no spreadsheet takes it for a formula.'

/**
 * Text that a spreadsheet would take for a formula, made plain by an apostrophe; full-width signs and leading blanks count.
 * @param text - any text
 * @returns the same text, or the text behind an apostrophe
 */
export function neutraliseCell(text: string): string {
  return /^\s*[=+\-@\uFF1D\uFF0B\uFF0D\uFF20]|^[\t\r\n]/.test(text) ? `'${text}` : text
}

/**
 * A table as separated text: numbers as numbers with a point, null as nothing, text neutralised.
 * @param rows - header and rows
 * @returns text by RFC 4180, the last line ended
 */
export function toCsv(rows: (string | number | null)[][]): string {
  const cells = rows.map(row => row.map(cell => cell === null ? '' : typeof cell === 'number' ? formatForField(cell) : neutraliseCell(cell)))
  return `${Papa.unparse(cells, { newline: '\r\n' })}\r\n`
}

const PLAIN_HEADER = ['condition', 'protocol', 'manipulation', 'interval_ms', 'ratio_mean', 'ratio_sd', 'ratio_sem', 'n', 'set_aside']
const CELLS_HEADER = ['condition', 'protocol', 'manipulation', 'cell', 'interval_ms', 'response1', 'ratio', 'set_aside']

/**
 * Means as a table in the plain form that the command lines read. Points set aside stay in it with their reason in the last column.
 * @param conditions - conditions [ms, 1]
 * @returns separated text
 */
export function summaryCsv(conditions: ConditionData[]): string {
  return toCsv([PLAIN_HEADER, ...conditions.flatMap(({ condition, protocol, manipulation, points }) =>
    points.map(({ intervalMs, ratio, sd, sem, n, aside }) => [condition, protocol, manipulation, intervalMs, ratio, sd, sem, n, aside ?? '']))])
}

/**
 * Single cells as a table; a lost cell has an empty ratio.
 * @param conditions - conditions with cells [ms, 1]
 * @returns separated text
 */
export function cellsCsv(conditions: ConditionData[]): string {
  return toCsv([CELLS_HEADER, ...conditions.flatMap(({ condition, protocol, manipulation, cells }) =>
    cells.map(({ cell, intervalMs, first, ratio, aside }) => [condition, protocol, manipulation, cell, intervalMs, first, ratio, aside ?? '']))])
}
