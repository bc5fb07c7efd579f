/** What each row of a file is: title, header, unit line, data, a header again, a remark. */
import type { ReadingChoices } from './choices'
import { missingSpelling, numberLike } from './cells'
import { readName, unitWord } from './names'
import type { FileRow } from './rows'
import { usualWidth } from './separator'

/** `data` is judged further, value by value. */
export type RowKind = 'header' | 'title' | 'blank' | 'empty' | 'unit' | 'again' | 'remark' | 'data'
export interface Layout {
  kinds: RowKind[]
  /** Index of the row; null where there is none. */
  header: number | null
  unit: number | null
  width: number
  /** Other rows that could be the header just as well, by index. */
  rivals: number[]
  /** Columns that the header names [count]; null where there is none. */
  named: number | null
  headerChosen: boolean
}
/** Rows among which a header is looked for [count]. */
const LOOKED_AT = 200

const filled = (row: FileRow) => row.cells.filter(cell => cell.trim() !== '')
const numbersIn = (row: FileRow) => row.cells.filter(cell => missingSpelling(cell) === null && numberLike(cell)).length
const holdsNumber = (row: FileRow) => row.cells.some(cell => missingSpelling(cell) === null && numberLike(cell))
const folded = (row: FileRow) => row.cells.map(cell => cell.trim().toLowerCase()).join('\n').trimEnd()
const commented = (row: FileRow) => /^(?:#|\/\/)/.test(row.cells[0]!.trim()) && missingSpelling(row.cells[0]!) === null

function looksLikeData(row: FileRow): boolean {
  if (commented(row)) return false
  const numbers = numbersIn(row)
  return numbers >= 2 || (numbers === 1 && filled(row).some(cell => missingSpelling(cell) !== null))
}

/** A single cell that another separator would split into numbers: a data row of mixed separators, not a remark. */
const foreignData = ({ cells }: FileRow): boolean => cells.length === 1 && [';', '\t', ','].some((separator) => {
  const pieces = cells[0]!.split(separator)
  return pieces.length > 1 && pieces.every(numberLikeOrNothing) && pieces.some(piece => missingSpelling(piece) === null)
})
const numberLikeOrNothing = (cell: string) => missingSpelling(cell) !== null || numberLike(cell)

/** Names of columns that are known among the cells of a row without numbers [count]. */
function namesIn(row: FileRow): number {
  if (numbersIn(row) > 0) return 0
  return new Set(filled(row).map(readName).filter(one => one.meaning !== null || one.bar).map(one => one.meaning ?? 'bar')).size
}

function findHeader(rows: FileRow[], width: number): { header: number | null, rivals: number[] } {
  const head = rows.slice(0, LOOKED_AT), known = head.map(namesIn), most = Math.max(0, ...known)
  if (most >= 2) {
    const best = known.flatMap((count, i) => count === most ? [i] : [])
    const first = best[0]!
    return { header: first, rivals: best.filter(i => i !== first && folded(rows[i]!) !== folded(rows[first]!)) }
  }
  const data = head.findIndex(looksLikeData)
  for (let i = data - 1; i >= 0; i--) {
    const row = rows[i]!, names = filled(row)
    if (names.length >= Math.max(2, 0.6 * width) && numbersIn(row) === 0 && !names.every(cell => unitWord(cell) !== null)) return { header: i, rivals: [] }
  }
  return { header: null, rivals: [] }
}

const isUnitLine = (row: FileRow) => filled(row).length > 0 && filled(row).every(cell => unitWord(cell) !== null)

function findUnit(rows: FileRow[], header: number | null): number | null {
  for (let i = (header ?? -1) + 1; i < Math.min(rows.length, LOOKED_AT); i++) {
    if (looksLikeData(rows[i]!)) return null
    if (isUnitLine(rows[i]!)) return i
  }
  return null
}

const indexOfLine = (rows: FileRow[], line: number | null) => {
  const index = line === null ? -1 : rows.findIndex(row => row.line === line)
  return index < 0 ? null : index
}

function kindOf(row: FileRow, i: number, { header, unit, first, headerText, unitText }: { header: number | null, unit: number | null, first: number, headerText: string | null, unitText: string | null }): RowKind {
  if (i === header) return 'header'
  if (i === unit) return 'unit'
  if (row.cells.length === 1 && row.cells[0]!.trim() === '') return 'blank'
  if (filled(row).length === 0) return 'empty'
  if (i < first) return 'title'
  const text = folded(row)
  if (text === headerText || text === unitText) return 'again'
  const holds = holdsNumber(row) || foreignData(row) || filled(row).some(cell => missingSpelling(cell) !== null)
  return !holds || commented(row) ? 'remark' : 'data'
}

/**
 * Judges every row.
 * @param rows - rows of the file
 * @param choices - lines that a person named as header or unit line
 * @returns one kind for each row, and the width of the table in cells
 */
export function layOut(rows: FileRow[], choices: ReadingChoices): Layout {
  const looksData = rows.slice(0, LOOKED_AT).filter(looksLikeData), usual = usualWidth(looksData)
  const guessed = findHeader(rows, usual)
  const header = choices.headerLine === undefined ? guessed.header : indexOfLine(rows, choices.headerLine)
  const unit = choices.unitLine === undefined ? findUnit(rows, header) : indexOfLine(rows, choices.unitLine)
  const firstData = rows.findIndex(looksLikeData)
  const first = header ?? (unit !== null && unit < firstData ? unit : firstData < 0 ? rows.length : firstData)
  const text = (index: number | null) => index === null ? null : folded(rows[index]!)
  const named = header === null ? null : 1 + rows[header]!.cells.findLastIndex(cell => cell.trim() !== '')
  const place = { header, unit, first, headerText: text(header), unitText: text(unit) }
  return {
    kinds: rows.map((row, i) => kindOf(row, i, place)), header, unit, width: Math.max(header === null ? 0 : rows[header]!.cells.length, usual),
    named, rivals: choices.headerLine === undefined ? guessed.rivals : [], headerChosen: choices.headerLine !== undefined,
  }
}
