/** Text to rows of cells with the line of the file that each begins on. */
import Papa from 'papaparse'
import type { Separator } from './reading'

export interface FileRow {
  /** Line of the file on which the row begins, from 1. */
  line: number
  cells: string[]
}
export interface SplitText {
  rows: FileRow[]
  /** Lines of the file, the last one counted whether or not it ends with a break [count]. */
  lines: number
  /** Line of a quote that is never closed, with its sentence; null where all close. */
  unclosed: { line: number, sentence: string } | null
}
/** A row with more cells is no table of recordings [count]; nor is a longer line [characters], nor a file with more lines [count]. */
export const MOST_CELLS = 500
export const LONGEST_LINE = 1_000_000
export const MOST_LINES = 3_000_000

/** Why a text is not even split: a line or a count of lines that no recording has. Text with line feeds only. */
export function shapelessness(text: string): string | null {
  let lines = 0
  for (let from = 0; from <= text.length;) {
    const at = text.indexOf('\n', from), end = at < 0 ? text.length : at
    lines++
    if (end - from > LONGEST_LINE) return `Line ${lines} is longer than ${LONGEST_LINE} characters; this is no table.`
    if (lines > MOST_LINES) return `This file has more than ${MOST_LINES} lines.`
    from = end + 1
  }
  return null
}

/** One kind of line break; which ones were there is told by `lineEndsOf`. */
export const withFeeds = (text: string): string => text.includes('\r') ? text.replace(/\r\n?/g, '\n') : text

/** The line ends of a text, as people call them. */
export function lineEndsOf(text: string): string {
  const both = text.includes('\r\n'), rest = both ? text.replaceAll('\r\n', '') : text
  const found = [both && 'CR LF', rest.includes('\n') && 'LF', rest.includes('\r') && 'CR'].filter(one => one !== false)
  return found.length === 0 ? 'none' : found.join(' and ')
}

function countFeeds(text: string, from: number, to: number): number {
  let count = 0
  for (let at = text.indexOf('\n', from); at >= 0 && at < to; at = text.indexOf('\n', at + 1)) count++
  return count
}

/**
 * Splits text into rows. Quoted cells may hold separators, doubled quotes and line breaks; nothing is trimmed or dropped.
 * @param text - text of a file, any line ends
 * @param separator - what stands between two cells
 * @param firstLine - line of the file on which the text begins [count from 1]
 * @param mostRows - rows beyond are not split [count]
 * @returns rows in file order; an unclosed quote is told with the line on which it opens
 */
export function splitRows(text: string, separator: Separator, firstLine = 1, mostRows = Infinity): SplitText {
  const tidy = withFeeds(text), body = tidy.endsWith('\n') ? tidy.slice(0, -1) : tidy
  const lines = firstLine + countFeeds(body, 0, body.length)
  // The library sees no row in an empty text; a lone break still ends one.
  const rows: FileRow[] = body === '' && tidy !== '' ? [{ line: firstLine, cells: [''] }] : []
  const plain = { delimiter: separator, newline: '\n' as const, skipEmptyLines: false, ...Number.isFinite(mostRows) ? { preview: mostRows } : {} }
  if (!body.includes('"')) {
    // Without quotes each line is a row: no need to follow the library row by row.
    const cut = Papa.parse<string[]>(body, plain).data
    return { rows: rows.length > 0 ? rows : cut.map((cells, i) => ({ line: firstLine + i, cells })), lines, unclosed: null }
  }
  let line = firstLine, unclosed: SplitText['unclosed'] = null
  Papa.parse<string[]>(body, {
    ...plain,
    step({ data, errors }) {
      if (errors.some(error => error.code === 'MissingQuotes')) {
        const opened = line + breaksBeforeOpening(data)
        unclosed ??= { line: opened, sentence: `A quote opens on line ${opened} and is never closed.` }
      }
      rows.push({ line, cells: data })
      for (const cell of data) if (cell.includes('\n')) line += countFeeds(cell, 0, cell.length)
      line++
    },
  })
  return { rows, lines, unclosed }
}

/** The unclosed cell is the last of its row: only breaks inside earlier cells lie before its quote. */
function breaksBeforeOpening(cells: string[]): number {
  return cells.slice(0, -1).reduce((sum, cell) => sum + countFeeds(cell, 0, cell.length), 0)
}

/** A row split again by another separator: what a row of mixed separators would be. */
export function splitAgain(row: FileRow, was: Separator, separator: Separator): string[] {
  return splitRows(row.cells.join(was), separator).rows[0]?.cells ?? []
}
