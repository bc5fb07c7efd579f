/** A large file read in pieces: its first rows as read, its lines counted, never more than a few milliseconds at a time. */
import type { FieldProblem } from '../schemas/problem'
import type { ReadingChoices } from './choices'
import { decodeBytes, sizeProblem, type Decoded } from './decode'
import { RowPieces } from './pieces'
import { readRecording } from './read'
import type { Reading } from './reading'
import type { FileRow } from './rows'
import { findSeparator } from './separator'

/** Text from which the preview is made [characters], and the piece of a file that is best given at once [bytes]. */
export const HEAD_CHARACTERS = 12_000
export const PIECE_BYTES = 65_536
const FEED = 10, RETURN = 13

export interface Progress {
  bytes: number
  /** Lines so far [count]. */
  lines: number
  /** Rows that hold something [count]. */
  rows: number
}

/** Where UTF-8 may be cut for a first look: behind its last line break. */
function wholeLines(bytes: Uint8Array): Uint8Array {
  for (let i = bytes.length - 1; i > bytes.length / 2; i--) if (bytes[i] === FEED || bytes[i] === RETURN) return bytes.subarray(0, i + 1)
  return bytes
}

export class FileStream {
  private decoder: TextDecoder | null = null
  private decoded: Decoded | null = null
  private rowPieces: RowPieces | null = null
  private head = ''
  private filledRows = 0
  private bytes = 0
  private ended = false
  /** Line of the first character that does not fit the encoding beyond the first piece; null where all fit. */
  misfitLine: number | null = null

  /**
   * @param size - length of the file [bytes], judged before anything is read
   * @param choices - encoding and separator that a person chose
   * @param onRows - takes every row, for a trace
   */
  constructor(size: number, private readonly choices: ReadingChoices = {}, private readonly onRows: (rows: FileRow[]) => void = () => {}) {
    this.problem = sizeProblem(size)
  }

  /** Why the file cannot be read; null where it can. */
  problem: FieldProblem | null

  /**
   * Takes the next piece of the file; nothing more happens once there is a problem.
   * @param piece - bytes in file order, best `PIECE_BYTES` at once
   * @returns progress so far
   */
  push(piece: Uint8Array): Progress {
    if (this.problem === null && this.decoder === null && piece.length > 0) this.begin(piece)
    if (this.problem === null && this.decoder) this.take(this.decoder.decode(piece, { stream: true }))
    this.bytes += piece.length
    return this.progress
  }

  /** Ends the file: the last row counts, with or without a line break. */
  end(): Progress {
    if (this.problem === null && this.decoder && !this.ended) {
      this.take(this.decoder.decode())
      this.give(this.rowPieces!.end())
      if (this.rowPieces!.unclosed) this.problem = { path: 'file', message: this.rowPieces!.unclosed.sentence }
    }
    if (this.bytes === 0) this.problem ??= sizeProblem(0)
    this.ended = true
    return this.progress
  }

  get progress(): Progress {
    return { bytes: this.bytes, lines: this.rowPieces?.lines ?? 0, rows: this.filledRows }
  }

  /**
   * The first rows as read; only what stands at the beginning can be guessed from them.
   * @param choices - what a person chose since
   * @returns a reading of the head, `fileLines` that of the file so far; null before the first piece or after a problem
   */
  preview(choices: ReadingChoices = this.choices): Reading | null {
    if (this.decoded === null || this.problem !== null) return null
    const cut = this.head.length < HEAD_CHARACTERS ? this.head : this.head.slice(0, this.head.lastIndexOf('\n') + 1)
    return { ...readRecording(cut, choices, this.decoded), fileLines: this.progress.lines }
  }

  private begin(piece: Uint8Array): void {
    const outcome = decodeBytes(wholeLines(piece), this.choices.encoding)
    if (!outcome.ok) {
      this.problem = outcome.problem
      return
    }
    this.decoded = outcome.decoded
    this.decoder = new TextDecoder(outcome.decoded.encoding)
    this.rowPieces = new RowPieces(findSeparator(outcome.decoded.text.slice(0, HEAD_CHARACTERS), this.choices.separator).separator)
  }

  private take(text: string): void {
    if (this.head.length < HEAD_CHARACTERS) this.head += text.slice(0, HEAD_CHARACTERS - this.head.length)
    if (this.misfitLine === null && this.decoded!.misfit === null && text.includes('\uFFFD')) this.misfitLine = this.progress.lines + 1
    this.give(this.rowPieces!.push(text))
  }

  private give(rows: FileRow[]): void {
    for (const row of rows) if (row.cells.length > 1 || row.cells[0] !== '') this.filledRows++
    if (rows.length > 0) this.onRows(rows)
  }
}
