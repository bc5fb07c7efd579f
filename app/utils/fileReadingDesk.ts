/** Holds the bytes of one file and reads them by a person's choices; runs in a worker of its own. */
import type { FieldProblem } from '#shared/schemas/problem'
import type { ReadingChoices } from '#shared/recordings/choices'
import { envelopeOf, type Envelope } from '#shared/recordings/envelope'
import { readBytes } from '#shared/recordings/read'
import type { Reading } from '#shared/recordings/reading'

/** Lines that a preview shows; the others are read all the same [count]. */
export const SHOWN_LINES = 300
/** Stretches that a trace is drawn in: one for each pixel of a wide figure [count]. */
const COLUMNS = 760
export type FileReading = { ok: true, reading: Reading, /** Lines that are not shown [count]. */ more: number, /** A trace, thinned for drawing. */ envelope: Envelope | null } | { ok: false, problem: FieldProblem }

export class FileReadingDesk {
  private bytes: Uint8Array = new Uint8Array()

  open(bytes: Uint8Array): void {
    this.bytes = bytes
  }

  read(choices: ReadingChoices): FileReading {
    const read = readBytes(this.bytes, choices)
    if (!read.ok) return read
    const { lines, trace: report } = read.reading
    const envelope = read.trace && report ? envelopeOf(read.trace, report.fromS, report.toS, COLUMNS) : null
    return { ok: true, reading: { ...read.reading, lines: lines.slice(0, SHOWN_LINES) }, more: Math.max(0, lines.length - SHOWN_LINES), envelope }
  }
}
