/** Decimal mark, unit of time and scale of the ratio: found, guessed, or asked. */
import type { ReadingChoices } from './choices'
import { markEvidence, missingSpelling, readCell } from './cells'
import type { ColumnRead, Decimal, Guess, Meaning, Option, Question, Separator } from './reading'
import type { FileRow } from './rows'

export interface Marks {
  decimal: Decimal
  settled: boolean
  timeUnit: 'ms' | 's' | 'min'
  ratioScale: 'ratio' | 'percent'
  errorScale: 'ratio' | 'percent'
}
interface Found { guess: Guess, question: Question | null }
const NUMERIC: Meaning[] = ['interval', 'ratio', 'sd', 'sem', 'half-width', 'lower-limit', 'upper-limit', 'n', 'first', 'second', 'time', 'capacitance', 'command']
const DECIMAL_OPTIONS: Option[] = [{ label: 'comma', choices: { decimal: ',' } }, { label: 'point', choices: { decimal: '.' } }]
const TIME_OPTIONS: Option[] = [{ label: 'ms', choices: { timeUnit: 'ms' } }, { label: 's', choices: { timeUnit: 's' } }, { label: 'min', choices: { timeUnit: 'min' } }]
const SCALE_OPTIONS: Option[] = [{ label: 'percent', choices: { ratioScale: 'percent' } }, { label: 'ratio', choices: { ratioScale: 'ratio' } }]

/** Every cell that should be a number, with its line. */
function numericCells(data: FileRow[], columns: ColumnRead[]): { cell: string, line: number }[] {
  const named = columns.filter(column => NUMERIC.includes(column.meaning)), wanted = named.length > 0 ? named : columns
  return data.flatMap(row => wanted.map(column => ({ cell: (row.cells[column.index] ?? '').trim(), line: row.line })).filter(one => missingSpelling(one.cell) === null))
}

/** The decimal mark of a file; cells with two meanings are asked, unless a person settled the mark. */
export function findDecimal(data: FileRow[], columns: ColumnRead[], separator: Separator, chosen?: Decimal): Found & { decimal: Decimal, settled: boolean } {
  const found = { '.': 0, ',': 0, 'both': [] as { cell: string, line: number }[] }
  for (const one of numericCells(data, columns)) {
    const evidence = markEvidence(one.cell)
    if (evidence === 'both') found.both.push(one)
    else if (evidence === '.' || evidence === ',') found[evidence]++
  }
  const comma = found[','] > found['.'], decimal = chosen ?? (comma ? ',' : '.'), name = decimal === ',' ? 'comma' : 'point', seen = found[decimal]
  const other: Decimal = decimal === ',' ? '.' : ','
  // A file separated by commas writes its points as decimal marks: groups would need quotes.
  const twoWays = found.both.filter(one => one.cell.includes(other) || (seen === 0 && !(separator === ',' && one.cell.includes('.'))))
  const mixed = found['.'] > 0 && found[','] > 0, ask = !chosen && (mixed || twoWays.length > 0), total = found['.'] + found[','] + found.both.length
  const example = twoWays[0]
  const sentence = chosen ? 'Chosen.' : total === 0 ? 'No number has a decimal mark.' : `In ${seen + found.both.length - twoWays.length} of ${total} numbers with a mark.`
  const guess: Guess = { id: 'decimal', label: 'Decimal mark', shown: name, sure: chosen ? 'chosen' : ask ? 'asked' : 'certain', sentence, options: DECIMAL_OPTIONS }
  const why = mixed ? `${found[',']} numbers have a decimal comma and ${found['.']} a decimal point` : `Line ${example?.line}, “${example?.cell}”, can be read in two ways`
  const question: Question | null = ask ? { id: 'decimal', must: true, sentence: `${why}; which is the decimal mark?`, lines: [...new Set(twoWays.map(one => one.line))], options: DECIMAL_OPTIONS, suggested: seen > 0 && !mixed ? Number(decimal === '.') : null } : null
  return { decimal, settled: chosen !== undefined, guess, question }
}

interface Numbers { values: number[], own: number, from: string, to: string }
function numbersOf(data: FileRow[], column: ColumnRead | undefined, unit: 's' | '1', decimal: Decimal, settled: boolean): Numbers {
  const read = column === undefined ? [] : data.map(row => readCell(row.cells[column.index] ?? '', decimal, settled, unit)).filter(one => one.kind === 'ok')
  const values = read.filter(one => !one.ownUnit).map(one => one.value)
  return { values, own: read.length - values.length, from: String(Math.min(...values)), to: String(Math.max(...values)) }
}

/** The unit of the interval: by name, unit line or the cells themselves; else asked, since a factor of 1,000 is at stake. */
export function findTimeUnit(data: FileRow[], column: ColumnRead | undefined, byName: boolean, decimal: Decimal, settled: boolean, chosen?: Marks['timeUnit']): Found & { timeUnit: Marks['timeUnit'] } {
  const { values, own, from, to } = numbersOf(data, column, 's', decimal, settled)
  const noun = column?.meaning === 'time' ? 'time' : 'interval'
  const named = (['ms', 's', 'min'] as const).find(unit => unit === column?.unit), largest = Math.max(0, ...values)
  const likely = largest >= 500 ? 'ms' : largest < 120 && values.some(value => !Number.isInteger(value)) ? 's' : null
  const timeUnit = chosen ?? named ?? likely ?? 'ms', range = values.length === 0 ? '' : ` It runs from ${from} to ${to}.`
  const ask = !chosen && !named && values.length > 0
  const sentence = chosen ? 'Chosen.' : named ? `The ${byName ? 'name' : 'unit line'} says ${named}.${range}` : values.length === 0 && own > 0 ? 'Every interval has its own unit.' : `Nothing says the unit.${range}`
  const guess: Guess = { id: 'time', label: noun === 'time' ? 'Time' : 'Interval', shown: timeUnit, sure: chosen ? 'chosen' : ask ? 'asked' : named && !byName ? 'guess' : 'certain', sentence, options: TIME_OPTIONS }
  const question: Question | null = ask ? { id: 'time', must: true, lines: [], sentence: `Nothing says the unit of the ${noun}, which runs from ${from} to ${to}; is it ms or s?`, options: TIME_OPTIONS, suggested: likely === null ? null : likely === 'ms' ? 0 : 1 } : null
  return { timeUnit, guess, question }
}

/** Percent or ratio: by name or unit line where the values agree, by the values where they leave no doubt; else asked. */
export function findRatioScale(data: FileRow[], column: ColumnRead | undefined, decimal: Decimal, settled: boolean, chosen?: Marks['ratioScale']): Found & { ratioScale: Marks['ratioScale'] } {
  const { values, own, from, to } = numbersOf(data, column, '1', decimal, settled)
  const above = values.filter(value => value > 1.5).length, most = above > values.length / 2, percent = column?.unit === '%', plain = column?.unit === '1'
  // Paired pulses that facilitate reach 2; no ratio reaches 5.
  const likely = most && Math.max(...values) > 5 ? 'percent' : 'ratio', ratioScale = chosen ?? likely
  const ask = !chosen && values.length > 0 && (percent ? !most : most)
  const range = values.length === 0 ? '' : `${above === 0 ? 'No value lies' : above === values.length ? 'Every value lies' : `${above} of ${values.length} values lie`} above 1.5`
  const says = percent ? ', and the name or unit line says %' : plain ? ', and the name or unit line says so' : ''
  const sentence = chosen ? 'Chosen.' : values.length === 0 && own > 0 ? 'Every value has its own per cent sign.' : `${range}${says}.`
  const guess: Guess = { id: 'ratio', label: 'Ratio', shown: ratioScale, sure: chosen ? 'chosen' : ask ? 'asked' : most ? 'guess' : 'certain', sentence, options: SCALE_OPTIONS }
  const doubt = percent ? 'The name or unit line says %, yet most values are 1.5 or less' : `Most values are above 1.5 (${from} to ${to})`
  const question: Question | null = ask ? { id: 'ratio', must: true, lines: [], sentence: `${doubt}; is this percent?`, options: SCALE_OPTIONS, suggested: likely === 'percent' ? 0 : null } : null
  return { ratioScale, guess, question }
}

/** Scale of SD, SEM and limits: what a person chose, else their own unit, else that of the ratio. */
export function errorScaleOf(columns: ColumnRead[], ratioScale: Marks['ratioScale'], choices: ReadingChoices): Marks['errorScale'] {
  const units = columns.filter(column => ['sd', 'sem', 'half-width', 'lower-limit', 'upper-limit'].includes(column.meaning)).map(column => column.unit)
  if (choices.errorScale) return choices.errorScale
  if (ratioScale === 'ratio' || units.every(unit => unit === '' || unit === '%')) return ratioScale
  return units.includes('1') ? 'ratio' : ratioScale
}
