/** What each column holds: by its name, by what a person chose, or asked. */
import type { ReadingChoices } from './choices'
import { missingSpelling, numberLike } from './cells'
import { letterOf, readName, unitWord } from './names'
import { ERROR_KINDS, MEANINGS, type ColumnRead, type Meaning, type Question } from './reading'
import type { Layout } from './layout'
import type { FileRow } from './rows'

export interface ColumnsRead { columns: ColumnRead[], questions: Question[], kind: 'summary' | 'cells' | 'trace' }

export const MEANING_NAMES: Record<Meaning, string> = {
  'interval': 'interval', 'ratio': 'ratio (second over first)', 'sd': 'SD', 'sem': 'SEM', 'half-width': 'half-width of the 95 % interval', 'lower-limit': 'lower 95 % limit', 'upper-limit': 'upper 95 % limit',
  'n': 'n', 'cell': 'name of the cell', 'condition': 'condition', 'protocol': 'protocol', 'manipulation': 'manipulation', 'first': 'first response', 'second': 'second response', 'aside': 'reason to stay out of fits',
  'time': 'time of the trace', 'capacitance': 'capacitance', 'command': 'command voltage', 'ignore': 'left out',
}
const one = (index: number, meaning: Meaning) => ({ label: MEANING_NAMES[meaning], choices: { columns: { [index]: meaning } } })
const calling = (column: ColumnRead) => column.name === '' ? `Column ${column.letter}` : `Column ${column.letter}, “${column.name}”,`

interface Body { cells: string[], numbers: number, whole: boolean }
/** Rows from which it is judged whether a column holds numbers [count]. */
const JUDGED = 500
/** What a column holds in the data rows. */
function bodyOf(rows: FileRow[], index: number): Body {
  const cells = rows.map(row => row.cells[index] ?? '').filter(cell => missingSpelling(cell) === null)
  const judged = cells.slice(0, JUDGED)
  return { cells, numbers: judged.filter(numberLike).length, whole: judged.every(cell => /^\s*\d+\s*$/.test(cell)) }
}

function firstGuess(index: number, name: string, unitCell: string, body: Body): ColumnRead & { bar: boolean } {
  const read = readName(name), unit = read.unit || (unitWord(unitCell) ?? '')
  const base = { index, letter: letterOf(index), name: name.trim(), unit, filled: body.cells.length, bar: false }
  if (body.cells.length === 0) return { ...base, meaning: read.meaning ?? 'ignore', sure: 'certain', sentence: 'Empty in every line.' }
  if (read.bar) return { ...base, bar: true, meaning: 'ignore', sure: 'asked', sentence: 'The name speaks of an error and does not say which.' }
  if (read.meaning === null) return { ...base, meaning: 'ignore', sure: 'guess', sentence: name.trim() === '' ? 'It has no name.' : `“${name.trim()}” is no name that is known here; the column is left out.` }
  return { ...base, meaning: read.meaning, sure: 'guess', sentence: 'Named so.' }
}

/** `time` is an interval unless a capacitance stands beside it and no ratio does. */
function settleTime(columns: ColumnRead[]): void {
  const has = (meaning: Meaning) => columns.some(column => column.meaning === meaning && column.filled > 0)
  const trace = has('capacitance') && has('time') && !has('ratio') && !has('interval')
  for (const column of columns) {
    if (column.sure === 'chosen') continue
    if (column.meaning === 'time' && !trace) Object.assign(column, has('interval') ? { meaning: 'ignore', sentence: 'Another column is the interval.' } : { meaning: 'interval', sentence: 'Taken for the interval, since no other column is one.' })
    if (!trace && (column.meaning === 'capacitance' || column.meaning === 'command')) Object.assign(column, { meaning: 'ignore', sentence: 'A trace needs a time beside a capacitance, and no ratio.' })
  }
}

/** Without names: the first numbers are perhaps interval, ratio, SEM and n, in this order. */
function suggestByPlace(columns: ColumnRead[], bodies: Body[]): Map<number, Meaning> {
  const order: Meaning[] = ['interval', 'ratio', 'sem', 'n'], suggested = new Map<number, Meaning>()
  const numeric = columns.filter(column => column.filled > 0 && bodies[column.index]!.numbers > 0.5 * Math.min(column.filled, JUDGED))
  numeric.slice(0, 4).forEach((column, i) => {
    const whole = bodies[column.index]!.whole
    suggested.set(column.index, i === 2 && whole ? 'n' : order[i]!)
  })
  const texts = columns.filter(column => column.filled > 0 && !numeric.includes(column))
  texts.forEach((column, i) => suggested.set(column.index, texts.length > 1 && i === texts.length - 1 ? 'cell' : i === 0 ? 'condition' : 'ignore'))
  return suggested
}

function askMeanings(columns: (ColumnRead & { bar: boolean })[], bodies: Body[], nameless: boolean): Question[] {
  const has = (meaning: Meaning) => columns.some(column => column.meaning === meaning && column.filled > 0)
  const enough = (has('interval') && (has('ratio') || (has('first') && has('second')))) || (has('time') && has('capacitance'))
  const suggested = nameless ? suggestByPlace(columns, bodies) : new Map<number, Meaning>()
  return columns.flatMap((column): Question[] => {
    if (column.sure === 'chosen' || column.filled === 0) return []
    if (column.bar) return [{
      id: `column-${column.letter}`, must: true, lines: [], suggested: null, sentence: `${calling(column)} is an error; is it SEM, SD or the half-width of a 95 % interval?`, options: ERROR_KINDS.map(kind => one(column.index, kind)),
    }]
    if (column.meaning !== 'ignore' || column.sentence.startsWith('Another') || enough) return []
    column.sure = 'asked'
    const [from, to] = [bodies[column.index]!.cells[0]!, bodies[column.index]!.cells.at(-1)!]
    const options = MEANINGS.map(meaning => one(column.index, meaning)), suggestion = suggested.get(column.index)
    return [{ id: `column-${column.letter}`, must: true, lines: [], sentence: `${calling(column)} goes from “${from.trim()}” to “${to.trim()}”; what does it hold?`, options, suggested: suggestion ? MEANINGS.indexOf(suggestion) : null }]
  })
}

/** Two columns of one meaning: which is meant must be said. */
function askTwice(columns: ColumnRead[]): Question[] {
  return MEANINGS.filter(meaning => meaning !== 'ignore').flatMap((meaning): Question[] => {
    const same = columns.filter(column => column.meaning === meaning && column.filled > 0)
    if (same.length < 2) return []
    for (const column of same) column.sure = 'asked'
    const options = same.map(column => ({
      label: `${column.letter}${column.name ? `, “${column.name}”` : ''}`,
      choices: { columns: Object.fromEntries(same.map(other => [other.index, other === column ? meaning : 'ignore'])) },
    }))
    return [{ id: `twice-${meaning}`, must: true, lines: [], suggested: null, options, sentence: `Columns ${same.map(column => column.letter).join(' and ')} can both be the ${MEANING_NAMES[meaning]}; which is meant?` }]
  })
}

/** Rows wider than their header: names may stand one column too far left, or decimal commas were split. */
function askWidth(columns: ColumnRead[], named: number | null): Question[] {
  const beyond = named === null ? [] : columns.filter(column => column.index >= named && column.filled > 0 && column.sure !== 'chosen')
  if (named === null || beyond.length === 0) return []
  const leave = Object.fromEntries(beyond.map(column => [column.index, 'ignore'])), names = columns.slice(0, named)
  const shifted = Object.fromEntries([[0, 'ignore'], ...names.map(column => [column.index + 1, column.meaning])])
  const unit = names.find(column => column.meaning === 'interval')?.unit ?? ''
  const moved = { columns: shifted, ...['ms', 's', 'min'].includes(unit) ? { timeUnit: unit } : {} }
  return [{
    id: 'header-width', must: true, lines: [], suggested: null,
    sentence: `The header names ${named} columns, yet the rows have ${beyond.at(-1)!.index + 1} cells. Where commas stand both between cells and in numbers, export with semicolons instead.`,
    options: [{ label: 'leave the columns without a name out', choices: { columns: leave } }, ...beyond.length === 1 ? [{ label: 'the names belong one column to the right', choices: moved }] : []],
  }]
}

/**
 * The meaning of every column.
 * @param rows - rows of the file (the first few hundred are enough)
 * @param layout - what each row is
 * @param choices - meanings that a person chose, by column index
 * @returns columns, what must be asked of them, and which kind of table they make
 */
export function readColumns(rows: FileRow[], layout: Layout, choices: ReadingChoices): ColumnsRead {
  const data = rows.filter((_, i) => layout.kinds[i] === 'data')
  const bodies = Array.from({ length: layout.width }, (_, index) => bodyOf(data, index))
  const cellOf = (row: number | null, index: number) => row === null ? '' : rows[row]!.cells[index] ?? ''
  const columns = bodies.map((body, index) => {
    const guess = firstGuess(index, cellOf(layout.header, index), cellOf(layout.unit, index), body)
    const chosen = choices.columns?.[String(index)]
    return chosen ? { ...guess, bar: false, meaning: chosen, sure: 'chosen' as const, sentence: 'Chosen.' } : guess
  })
  settleTime(columns)
  const questions = [...askMeanings(columns, bodies, layout.header === null), ...askTwice(columns), ...askWidth(columns, layout.named)]
  const has = (meaning: Meaning) => columns.some(column => column.meaning === meaning && column.filled > 0)
  const kind = has('time') && has('capacitance') ? 'trace' : has('cell') ? 'cells' : 'summary'
  return { columns: columns.map(({ bar: _, ...column }) => column), questions, kind }
}
