/** The frame of a reading, settled from the first rows: separator, header, columns, marks. */
import type { ReadingChoices } from './choices'
import { readColumns, type ColumnsRead } from './columns'
import { layOut, type Layout } from './layout'
import { errorScaleOf, findDecimal, findRatioScale, findTimeUnit, type Marks } from './marks'
import type { ColumnRead, Guess, Meaning, Question, Separator } from './reading'
import type { FileRow } from './rows'

export interface Frame extends ColumnsRead {
  layout: Layout
  marks: Marks
  guesses: Guess[]
  questions: Question[]
  /** First column of each meaning that holds something. */
  byMeaning: Partial<Record<Meaning, ColumnRead>>
}

function headerGuess(rows: FileRow[], layout: Layout): Guess {
  const line = layout.header === null ? null : rows[layout.header]!.line
  const none = { label: 'none', choices: { headerLine: null } }
  const around = rows.slice(0, 12).filter((row, i) => layout.kinds[i] !== 'blank' && row.cells.length > 1).map(row => ({ label: `line ${row.line}`, choices: { headerLine: row.line } }))
  const sentence = layout.headerChosen ? 'Chosen.' : line === null ? 'No row above the numbers looks like names.' : 'Its cells are names, used for the columns.'
  return { id: 'header', label: 'Header', shown: line === null ? 'none' : `line ${line}`, sure: layout.headerChosen ? 'chosen' : layout.rivals.length > 0 ? 'asked' : line === null ? 'guess' : 'certain', sentence, options: [...around, none] }
}

function unitGuess(rows: FileRow[], layout: Layout, choices: ReadingChoices): Guess[] {
  if (layout.unit === null) return []
  const line = rows[layout.unit]!.line
  return [{ id: 'unit', label: 'Unit line', shown: `line ${line}`, sure: choices.unitLine === undefined ? 'certain' : 'chosen', sentence: 'Each of its cells is a unit.', options: [{ label: 'none', choices: { unitLine: null } }] }]
}

function headerQuestion(rows: FileRow[], layout: Layout): Question[] {
  if (layout.rivals.length === 0 || layout.header === null) return []
  const lines = [layout.header, ...layout.rivals].map(index => rows[index]!.line)
  return [{ id: 'header', must: true, lines, suggested: null, sentence: `Lines ${lines.join(' and ')} both look like headers; which one holds?`, options: lines.map(line => ({ label: `line ${line}`, choices: { headerLine: line } })) }]
}

const kind = (shown: string, sentence: string): Guess => ({ id: 'kind', label: 'Table', shown, sure: 'certain', sentence, options: [] })
const KINDS: Record<Frame['kind'], Guess> = {
  summary: kind('means', 'No column names single cells.'), cells: kind('single cells', 'A column names the cells; means, SD, SEM and n are made from them.'), trace: kind('raw trace', 'A time stands beside a capacitance, and no ratio.'),
}

const firstOf = (columns: ColumnRead[]): Frame['byMeaning'] => {
  const found: Frame['byMeaning'] = {}
  for (const column of columns) if (column.filled > 0) found[column.meaning] ??= column
  return found
}

/** Units that the header names itself are beyond doubt; those of a unit line are shown to be confirmed. */
const unitByName = (column: ColumnRead | undefined, rows: FileRow[], layout: Layout) => column !== undefined && (layout.unit === null || (rows[layout.unit]!.cells[column.index] ?? '').trim() === '')

/**
 * Settles the frame of a table.
 * @param rows - rows of the file
 * @param separator - as found or chosen
 * @param choices - what a person chose
 * @returns frame with its guesses and questions
 */
export function frameOf(rows: FileRow[], separator: Separator, choices: ReadingChoices): Frame {
  const layout = layOut(rows, choices), read = readColumns(rows, layout, choices), byMeaning = firstOf(read.columns)
  const data = rows.filter((_, i) => layout.kinds[i] === 'data')
  const { decimal, settled, ...mark } = findDecimal(data, read.columns, separator, choices.decimal)
  const times = byMeaning.interval ?? byMeaning.time
  const { timeUnit, ...time } = findTimeUnit(data, times, unitByName(times, rows, layout), decimal, settled, choices.timeUnit)
  const { ratioScale, ...ratio } = findRatioScale(data, byMeaning.ratio, decimal, settled, choices.ratioScale)
  const found = [mark, ...times ? [time] : [], ...byMeaning.ratio ? [ratio] : []]
  return {
    ...read, layout, byMeaning, marks: { decimal, settled, timeUnit, ratioScale, errorScale: errorScaleOf(read.columns, ratioScale, choices) },
    guesses: [KINDS[read.kind], headerGuess(rows, layout), ...unitGuess(rows, layout, choices), ...found.map(one => one.guess)],
    questions: [...headerQuestion(rows, layout), ...read.questions, ...found.flatMap(one => one.question ?? [])],
  }
}
