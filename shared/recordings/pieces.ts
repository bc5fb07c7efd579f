/** Text that arrives in pieces, to rows: cut at line breaks outside of quotes, so that no row is torn. */
import type { Separator } from './reading'
import { splitRows, type FileRow } from './rows'

/** A row longer than this waits for a quote that never closes [characters]. */
const LONGEST_ROW = 1_000_000

export class RowPieces {
  private pending: string[] = []
  private waiting = 0
  private open = false
  private returned = false
  private nextLine = 1
  /** First line on which a quote opens and is never closed; null where all close. */
  unclosed: { line: number, sentence: string } | null = null

  constructor(private readonly separator: Separator) {}

  /** Lines that have been given out [count]. */
  get lines(): number {
    return this.nextLine - 1
  }

  /**
   * Takes the next piece.
   * @param text - text in file order, cut anywhere
   * @returns whole rows that are now complete, with their lines
   */
  push(text: string): FileRow[] {
    const tidy = this.withFeeds(text), cut = this.safeCut(tidy)
    if (cut < 0) {
      this.pending.push(tidy)
      this.waiting += tidy.length
      return this.waiting > LONGEST_ROW ? this.giveUpWaiting() : []
    }
    const whole = [...this.pending, tidy.slice(0, cut + 1)].join('')
    this.pending = [tidy.slice(cut + 1)]
    this.waiting = tidy.length - cut - 1
    return this.split(whole)
  }

  /** A quote that stands inside a plain cell (5") closes nothing: the rows so far are cut at their last break after all. */
  private giveUpWaiting(): FileRow[] {
    const text = this.pending.join(''), cut = text.lastIndexOf('\n') + 1
    this.pending = [text.slice(cut)]
    this.waiting = text.length - cut
    this.open = false
    return cut === 0 ? [] : this.split(text.slice(0, cut))
  }

  /** The rest, when no more comes. */
  end(): FileRow[] {
    const rest = this.pending.join('')
    this.pending = []
    this.waiting = 0
    this.open = false
    return rest === '' ? [] : this.split(rest)
  }

  private split(text: string): FileRow[] {
    const { rows, lines, unclosed } = splitRows(text, this.separator, this.nextLine)
    this.nextLine = lines + 1
    this.unclosed ??= unclosed
    return rows
  }

  /** One kind of line break, also where CR and LF fall into two pieces. */
  private withFeeds(text: string): string {
    const rest = this.returned && text.startsWith('\n') ? text.slice(1) : text
    if (text !== '') this.returned = text.endsWith('\r')
    return rest.includes('\r') ? rest.replace(/\r\n?/g, '\n') : rest
  }

  /** Last line break at which no quote is open; quotes are counted on over pieces. */
  private safeCut(text: string): number {
    if (!this.open && !text.includes('"')) return text.lastIndexOf('\n')
    let cut = -1
    for (let i = 0; i < text.length; i++) {
      const code = text.charCodeAt(i)
      if (code === 34) this.open = !this.open
      else if (code === 10 && !this.open) cut = i
    }
    return cut
  }
}
