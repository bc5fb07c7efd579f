/** Which separator a text is written with, judged by its first rows. */
import { missingSpelling, numberLike } from './cells'
import type { Guess, Separator } from './reading'
import { splitRows, type FileRow } from './rows'

export const SEPARATORS: Separator[] = [';', '\t', ',']
export const SEPARATOR_NAMES: Record<Separator, string> = { ',': 'comma', ';': 'semicolon', '\t': 'tab' }
/** Rows that are looked at [count], and how much of the text they may span [characters]. */
const LOOKED_AT = 200, HEAD = 12_000

/** The most frequent count of cells among rows that hold something, the larger at a tie [count]. */
export function usualWidth(rows: FileRow[]): number {
  const counts = new Map<number, number>()
  for (const row of rows) if (row.cells.some(cell => cell.trim() !== '')) counts.set(row.cells.length, (counts.get(row.cells.length) ?? 0) + 1)
  return [...counts].sort((a, b) => b[1] - a[1] || b[0] - a[0])[0]?.[0] ?? 0
}

/** Rows of the usual width, each weighted by its share of cells that are a number or nothing or a short word [rows]. */
function score(rows: FileRow[]): number {
  const width = usualWidth(rows)
  if (width < 2) return 0
  let sum = 0
  for (const { cells } of rows) {
    if (cells.length !== width || cells.every(cell => cell.trim() === '')) continue
    const clean = cells.filter(cell => missingSpelling(cell) !== null || numberLike(cell) || !/[;\t]|\d,\d/.test(cell)).length
    const numbers = cells.filter(cell => missingSpelling(cell) === null && numberLike(cell)).length
    sum += clean / width * (numbers > 0 ? 1 : 0.25)
  }
  return sum
}

/**
 * The separator of a text.
 * @param text - the whole text or its beginning
 * @param chosen - what a person chose
 * @returns the separator with how sure it is
 */
export function findSeparator(text: string, chosen?: Separator): { separator: Separator, guess: Guess } {
  const head = text.length > HEAD ? text.slice(0, text.lastIndexOf('\n', HEAD) + 1 || HEAD) : text
  const ranked = SEPARATORS.map(separator => ({ separator, score: score(splitRows(head, separator).rows.slice(0, LOOKED_AT)) })).sort((a, b) => b.score - a.score)
  const best = ranked[0]!, second = ranked[1]!
  const separator = chosen ?? (best.score === 0 ? ',' : best.separator)
  const close = second.score > 0 && second.score > 0.9 * best.score
  return {
    separator,
    guess: {
      id: 'separator', label: 'Separator', shown: SEPARATOR_NAMES[separator], sure: chosen ? 'chosen' : close ? 'asked' : best.score > 2 * second.score ? 'certain' : 'guess',
      sentence: chosen ? 'Chosen.' : close ? `Cells stand apart by ${SEPARATOR_NAMES[best.separator]} as well as by ${SEPARATOR_NAMES[second.separator]}.` : `It gives rows of one width.`,
      options: SEPARATORS.map(one => ({ label: SEPARATOR_NAMES[one], choices: { separator: one } })),
    },
  }
}
