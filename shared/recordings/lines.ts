/** Every line of a table, read one after the other: kept, refused or set aside, each with its reason. */
import { missingSpelling } from './cells'
import type { ReadingChoices } from './choices'
import type { NamedLine } from './conditions'
import type { Frame } from './frame'
import type { RowKind } from './layout'
import { readLine, type TableContext } from './line'
import type { LineRead, Meaning, Separator } from './reading'
import { splitAgain, type FileRow } from './rows'
import { SEPARATORS } from './separator'

const REMARKS: Record<Exclude<RowKind, 'data'>, string> = {
  header: 'header, used for names', unit: 'set aside: unit line, used for units', title: 'set aside: title', blank: 'set aside: blank line', empty: 'set aside: empty row',
  again: 'set aside: header or unit line again', remark: 'set aside: remark',
}
const NAMES: Meaning[] = ['condition', 'protocol', 'manipulation', 'cell']

/** Cells of a row that fits the table, or null where it is ragged. */
function fitting(row: FileRow, frame: Frame): string[] | null {
  const { cells } = row, { width } = frame.layout
  if (cells.slice(width).some(cell => cell.trim() !== '')) return null
  const lacks = frame.columns.some(column => column.index >= cells.length && column.filled > 0 && column.meaning !== 'ignore')
  return lacks ? null : cells.slice(0, width)
}

/** A ragged row made to fit: split by the separator that gives the table's width, else cut or filled with nothing. */
function forced(row: FileRow, frame: Frame, separator: Separator): string[] {
  const other = SEPARATORS.filter(one => one !== separator).map(one => splitAgain(row, separator, one)).find(cells => cells.length > 1 && cells.length === frame.layout.width)
  const cells = other ?? row.cells
  return Array.from({ length: frame.layout.width }, (_, i) => cells[i] ?? '')
}

/** Names that stand only once, above: columns of names that are empty in some data rows. */
class FillDown {
  private readonly last = new Map<Meaning, string>()
  constructor(private readonly frame: Frame, private readonly choice: boolean | undefined) {}

  /** Whether a name is missing that stood above, and the cells with it where that was chosen. */
  apply(cells: string[]): { cells: string[], nameless: boolean } {
    let nameless = false
    const filled = [...cells]
    for (const meaning of NAMES) {
      const column = this.frame.byMeaning[meaning]
      if (!column) continue
      const cell = cells[column.index] ?? ''
      if (missingSpelling(cell) === null) this.last.set(meaning, cell)
      else if (this.choice === true && this.last.has(meaning)) filled[column.index] = this.last.get(meaning)!
      else if (meaning === 'condition' || meaning === 'cell') nameless = true
    }
    return { cells: filled, nameless }
  }
}

type Lines = { lines: LineRead[], kept: NamedLine[] }

/**
 * Reads the lines of a table of means or cells.
 * @param rows - rows of the file
 * @param frame - the frame of the table
 * @param context - columns and marks for one line; its tally is added to
 * @param choices - what a person chose
 * @returns every line, and those that are kept with their names
 */
export function readLines(rows: FileRow[], frame: Frame, context: TableContext, choices: ReadingChoices, separator: Separator): Lines {
  const fillDown = new FillDown(frame, choices.fillDown), found: Lines = { lines: [], kept: [] }
  const aside = ({ line, cells }: FileRow, kind: LineRead['kind'], remark: string) => found.lines.push({ line, cells, kind, remark, kept: null })
  const { interval, ratio, first, second } = frame.byMeaning, complete = interval !== undefined && (ratio !== undefined || (first !== undefined && second !== undefined))
  const end = frame.layout.kinds.lastIndexOf('data')
  rows.forEach((row, i) => {
    const kind = frame.layout.kinds[i]!, fits = fitting(row, frame), taken = fits ?? forced(row, frame, separator)
    const leftOut = choices.leftOut?.[String(row.line)]
    if (kind !== 'data') return aside(row, kind, kind === 'remark' && i > end ? 'set aside: remark under the table' : REMARKS[kind])
    if (leftOut !== undefined) return aside(row, 'chosen', `set aside: ${leftOut}`)
    if (fits === null && choices.ragged === undefined) context.tally.note('ragged', row.line)
    if (fits === null && choices.ragged !== 'take') return aside(row, 'ragged', `set aside: ${row.cells.length} cells where the table has ${frame.layout.width}`)
    if (!complete) return aside(row, 'open', 'waits until it is said what the columns hold')
    const { cells, nameless } = fillDown.apply(taken)
    if (nameless && choices.fillDown === undefined) context.tally.note('nameless', row.line)
    if (nameless) return aside(row, 'refused', 'refused: The condition or the cell has no name here.')
    const { protocol, manipulation, ...line } = readLine(row.line, cells, context)
    found.lines.push({ ...line, cells: row.cells })
    if (line.kept) found.kept.push({ line: row.line, kept: line.kept, protocol, manipulation })
  })
  return found
}
