/** A capacitance trace as samples: gathered row by row, checked for order, evenness and gaps. */
import type { FieldProblem } from '../schemas/problem'
import { plainDecimal } from '../units'
import { readCell } from './cells'
import type { Frame } from './frame'
import type { Decimal, Warning } from './reading'
import type { FileRow } from './rows'

/** Samples by index; a missing value is NaN. */
export interface Trace {
  /** Time [s], strictly rising. */
  timeS: Float64Array
  /** Capacitance [fF]. */
  capacitanceFf: Float64Array
  /** Command voltage [mV]; null where the file has none. */
  commandMv: Float64Array | null
  /** Usual distance of two samples [s]. */
  sampleS: number
}
export interface TraceRead { trace: Trace, warnings: Warning[], problems: FieldProblem[], refused: { line: number, reason: string }[], missing: number }

/** Femtofarads in a unit of capacitance; without a unit femtofarads are assumed and told. */
const FEMTOFARADS: Record<string, number> = { fF: 1, aF: 1e-3, pF: 1000 }
const FEWEST = 10 // samples of a trace

/** Numbers that grow as rows come in. */
class Growing {
  private values = new Float64Array(4096)
  length = 0
  push(value: number): void {
    if (this.length === this.values.length) {
      const larger = new Float64Array(2 * this.length)
      larger.set(this.values)
      this.values = larger
    }
    this.values[this.length++] = value
  }

  get last(): number {
    return this.values[this.length - 1] ?? -Infinity
  }

  done(): Float64Array {
    return this.values.slice(0, this.length)
  }
}

/** Index of the first sample at or after a time; a rounding of a millionth of a sample is forgiven. */
export function firstAt(timeS: Float64Array, atS: number): number {
  let low = 0, high = timeS.length
  const edge = atS - 1e-9 * Math.max(1, Math.abs(atS))
  while (low < high) {
    const middle = (low + high) >> 1
    if (timeS[middle]! < edge) low = middle + 1
    else high = middle
  }
  return low
}

/** Median by sorting a copy [same unit as the values]. */
function median(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort()
  return sorted.length === 0 ? NaN : sorted[Math.floor(sorted.length / 2)]!
}

export class TraceSamples {
  private readonly time = new Growing()
  private readonly capacitance = new Growing()
  private readonly command = new Growing()
  private readonly refused: TraceRead['refused'] = []
  private refusedCount = 0
  private missing = 0
  private started = false
  private readonly decimal: Decimal
  private readonly toSeconds: number
  private readonly toFemtofarads: number

  /** @param frame - columns and marks, settled from the first rows */
  constructor(private readonly frame: Frame) {
    this.decimal = frame.marks.decimal
    this.toSeconds = { ms: 1000, s: 1, min: 1 / 60 }[frame.marks.timeUnit]
    this.toFemtofarads = FEMTOFARADS[frame.byMeaning.capacitance?.unit ?? ''] ?? 1
  }

  /** Takes rows in file order; rows before the first sample are titles. */
  rows(rows: FileRow[]): void {
    const { time, capacitance, command } = this.frame.byMeaning
    if (!time || !capacitance) return
    for (const { line, cells } of rows) {
      const at = this.number(cells[time.index])
      if (typeof at === 'string') {
        if (this.started && at !== 'missing') this.refuse(line, `time: ${at}`)
        continue
      }
      const seconds = at / this.toSeconds
      if (this.started && seconds <= this.time.last) {
        this.refuse(line, 'The time does not rise.')
        continue
      }
      this.started = true
      this.time.push(seconds)
      this.capacitance.push(this.sample(cells[capacitance.index], line) * this.toFemtofarads)
      if (command) this.command.push(this.sample(cells[command.index], line))
    }
  }

  private number(cell = ''): number | string {
    const plain = plainDecimal(cell, this.decimal)
    if (plain !== null) return plain
    const read = readCell(cell, this.decimal, this.frame.marks.settled, '1')
    if (read.kind === 'ok') return read.value
    return read.kind === 'missing' ? 'missing' : read.kind === 'ambiguous' ? 'It can be read in two ways.' : read.sentence
  }

  private sample(cell: string | undefined, line: number): number {
    const read = this.number(cell)
    if (typeof read === 'number') return read
    if (read === 'missing') this.missing++
    else this.refuse(line, read)
    return NaN
  }

  private refuse(line: number, reason: string): void {
    this.refusedCount++
    if (this.refused.length < 200) this.refused.push({ line, reason })
  }

  /** Ends the trace and says what is odd about it. */
  done(): TraceRead {
    const timeS = this.time.done(), capacitanceFf = this.capacitance.done()
    const steps = timeS.slice(1).map((time, i) => time - timeS[i]!), sampleS = median(steps)
    const trace: Trace = { timeS, capacitanceFf, commandMv: this.frame.byMeaning.command ? this.command.done() : null, sampleS }
    const problems: FieldProblem[] = timeS.length < FEWEST ? [{ path: 'file', message: `A trace of ${timeS.length} samples is too short; at least ${FEWEST} are wanted.` }] : []
    return { trace, problems, refused: this.refused, missing: this.missing, warnings: [...this.oddTimes(trace, steps), ...this.oddUnit(sampleS), ...this.oddValues()] }
  }

  private oddTimes({ timeS, sampleS }: Trace, steps: Float64Array): Warning[] {
    const found: Warning[] = [], gaps: string[] = []
    let uneven = 0, gapCount = 0
    steps.forEach((step, i) => {
      if (step <= 1.5 * sampleS) {
        if (Math.abs(step - sampleS) > 0.02 * sampleS) uneven++
      } else if (gapCount++ < 3) gaps.push(`${seconds(timeS[i]!)} to ${seconds(timeS[i + 1]!)} s`)
    })
    if (uneven > 0) found.push({ id: 'uneven', lines: [], sentence: `${uneven} of ${steps.length} distances between samples differ from ${seconds(sampleS * 1000)} ms by more than 2 %.` })
    if (gapCount > 0) found.push({ id: 'gaps', lines: [], sentence: `${gapCount} ${gapCount === 1 ? 'gap' : 'gaps'} in time: ${gaps.join(', ')}${gapCount > 3 ? ' and more' : ''}.` })
    return found
  }

  /** A sampling rate that no rig has means that ms were called s, or the other way round. */
  private oddUnit(sampleS: number): Warning[] {
    const rate = 1 / sampleS, unit = this.frame.marks.timeUnit
    if (unit === 's' && rate <= 5) return [{ id: 'rate', lines: [], sentence: `In s the samples lie ${seconds(sampleS)} s apart (${seconds(rate)} Hz); perhaps the time is in ms.` }]
    return unit === 'ms' && rate > 500_000 ? [{ id: 'rate', lines: [], sentence: `In ms the samples lie ${seconds(sampleS * 1e6)} µs apart; perhaps the time is in s.` }] : []
  }

  private oddValues(): Warning[] {
    const unit = this.frame.byMeaning.capacitance?.unit ?? '', found: Warning[] = []
    if (FEMTOFARADS[unit] === undefined) found.push({ id: 'capacitance-unit', lines: [], sentence: `Nothing says the unit of the capacitance${unit ? ` but “${unit}”` : ''}; fF are assumed.` })
    if (this.missing > 0) found.push({ id: 'missing-samples', lines: [], sentence: `${this.missing} samples hold no number; they count in no mean.` })
    if (this.refusedCount > 0) found.push({ id: 'refused-samples', lines: this.refused.slice(0, 5).map(one => one.line), sentence: `${this.refusedCount} cells could not be read, the first on line ${this.refused[0]!.line}: ${this.refused[0]!.reason}` })
    return found
  }
}
const seconds = (value: number) => String(Number(value.toPrecision(4)))
