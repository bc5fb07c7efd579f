/** One data line to the values that would be kept, or to the reason why not. */
import { neutraliseText } from '../schemas/text'
import { missingSpelling, readCell, type CellRead } from './cells'
import type { ReadingChoices } from './choices'
import type { Marks } from './marks'
import type { ColumnRead, KeptValues, LineKind, LineRead, Meaning } from './reading'
import { settleSpread, type StatedErrors } from './spread'
import type { Tally } from './tally'

export interface TableContext {
  columns: Partial<Record<Meaning, ColumnRead>>
  marks: Marks
  choices: ReadingChoices
  kind: 'summary' | 'cells'
  tally: Tally
}
/** Reasons carry through as an exception, so that reading a line stays one straight path. */
class Unkept extends Error {
  constructor(readonly kind: LineKind, message: string) { super(message) }
}
const LABELS: Partial<Record<Meaning, string>> = { 'interval': 'interval', 'ratio': 'ratio', 'sd': 'SD', 'sem': 'SEM', 'half-width': 'half-width', 'lower-limit': 'lower limit', 'upper-limit': 'upper limit', 'n': 'n', 'first': 'first response', 'second': 'second response' }
const refuse = (sentence: string): never => { throw new Unkept('refused', sentence) }

type Read = Extract<CellRead, { kind: 'ok' }>

class LineReader {
  constructor(private readonly context: TableContext, private readonly line: number, private readonly cells: string[]) {}

  text(meaning: Meaning): string {
    const column = this.context.columns[meaning], cell = column ? this.cells[column.index] ?? '' : ''
    // Our own export guards formula-like names by an apostrophe; here it comes off again.
    return missingSpelling(cell) === null ? neutraliseText(cell).replace(/^'(?=[=+\-@])/, '').slice(0, 120) : ''
  }

  number(meaning: Meaning): Read | null {
    const { columns, marks, tally } = this.context, column = columns[meaning]
    if (!column) return null
    const [unit, into] = meaning === 'interval' ? [marks.timeUnit, 'ms' as const] : [this.unitOf(meaning), '1' as const]
    const read = readCell(this.cells[column.index] ?? '', marks.decimal, marks.settled, unit, into)
    if (read.kind === 'ok') return read
    if (read.kind === 'missing') tally.countMissing(read.spelling)
    else if (read.kind === 'refused') refuse(`${LABELS[meaning] ?? meaning}: ${read.sentence}`)
    else {
      tally.note('two-ways', this.line)
      refuse(`${LABELS[meaning] ?? meaning}: “${(this.cells[column.index] ?? '').trim()}” can be read in two ways; the decimal mark is asked.`)
    }
    return null
  }

  private unitOf(meaning: Meaning): '%' | '1' {
    if (meaning === 'n' || meaning === 'first' || meaning === 'second') return '1'
    return (meaning === 'ratio' ? this.context.marks.ratioScale : this.context.marks.errorScale) === 'percent' ? '%' : '1'
  }

  interval(): number {
    const read = this.number('interval') ?? refuse('The interval is missing.')
    if (read.value < 0) refuse(`The interval is negative (${read.value} ms).`)
    if (read.value === 0) this.context.tally.note('zero-interval', this.line)
    return read.value
  }

  count(): number | null {
    const { choices, tally } = this.context, read = this.number('n')
    if (read === null) {
      if (choices.missingN === undefined) tally.note('no-n', this.line)
      return choices.missingN ?? null
    }
    return Number.isInteger(read.value) && read.value >= 1 && read.value <= 100_000 ? read.value : refuse(`n is ${read.value}; a whole number of cells from 1 is wanted.`)
  }

  /** The stated ratio, else second over first; told where a unit of the last digits (programs cut as well as round) cannot explain the difference. */
  ratio(first: Read | null): number | null {
    const stated = this.number('ratio'), second = this.number('second'), { tally } = this.context
    if (first && second && first.value === 0) tally.note('zero-first', this.line)
    if (!first || !second || first.value === 0) return stated?.value ?? null
    const made = second.value / first.value
    if (!stated) return made
    const slack = stated.rounding + Math.abs(1 / first.value) * second.rounding + Math.abs(made / first.value) * first.rounding
    if (Math.abs(made - stated.value) > 2.01 * slack + 1e-12) tally.note('ratio-disagrees', this.line)
    return stated.value
  }

  /** An error bar: negative is refused, 0 is asked. */
  private bar(meaning: 'sd' | 'sem' | 'half-width', n: number | null): Read | null {
    const read = this.number(meaning)
    if (read && read.value < 0) refuse(`The ${LABELS[meaning]} is negative.`)
    if (read?.value !== 0) return read
    if (n === 1) return null
    if (this.context.choices.zeroError === undefined) this.context.tally.note('zero-error', this.line)
    // `smallest` is settled once the whole condition is known; until then 0 marks it.
    return this.context.choices.zeroError === 'smallest' ? read : null
  }

  spread(ratio: number, n: number | null): { sd: number | null, sem: number | null } {
    const stated: StatedErrors = {
      ratio, n, sd: this.bar('sd', n), sem: this.bar('sem', n), halfWidth: this.bar('half-width', n)?.value ?? null,
      lower: this.number('lower-limit')?.value ?? null, upper: this.number('upper-limit')?.value ?? null,
    }
    if (stated.lower !== null && stated.upper !== null && stated.lower > stated.upper) refuse('The lower limit lies above the upper one.')
    const { sd, sem, notes } = settleSpread(stated)
    for (const note of notes) this.context.tally.note(note, this.line)
    return { sd, sem }
  }

  keep(condition: string): KeptValues {
    const intervalMs = this.interval(), first = this.number('first'), ratio = this.ratio(first)
    const base = { condition, intervalMs, ratio, first: first?.value ?? null, aside: this.text('aside') || null }
    if (this.context.kind === 'cells') {
      const cell = this.text('cell')
      return { ...base, cell: cell === '' ? refuse('The name of the cell is missing.') : cell, sd: null, sem: null, n: null }
    }
    if (ratio === null) throw new Unkept('lost', 'There is no ratio.')
    const n = this.count()
    return { ...base, ratio, cell: null, n, ...this.spread(ratio, n) }
  }
}

/**
 * Reads one data line.
 * @param line - line of the file
 * @param cells - its cells, names filled down where that was chosen
 * @param context - columns, marks and choices of the table; its tally is added to
 * @returns the line with its values, or refused or set aside with the reason
 */
export function readLine(line: number, cells: string[], context: TableContext): LineRead & { protocol: string, manipulation: string } {
  const reader = new LineReader(context, line, cells)
  const names = { protocol: reader.text('protocol'), manipulation: reader.text('manipulation') }
  try {
    return { line, cells, kind: 'point', remark: '', kept: reader.keep(reader.text('condition')), ...names }
  } catch (error) {
    if (!(error instanceof Unkept)) throw error
    return { line, cells, kind: error.kind, remark: `${error.kind === 'refused' ? 'refused' : 'set aside'}: ${error.message}`, kept: null, ...names }
  }
}
