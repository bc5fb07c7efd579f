/** Mappings: how a file was read, kept for the next file with the same header. */
import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js'
import type { ReadingChoices } from './choices'
import type { ColumnRead, Reading } from './reading'

/**
 * Digest of a header's shape: names and units in order, folded, trailing empty columns left off. Rows, titles and separators do not count.
 * @param columns - columns as read
 * @returns 64 hexadecimal digits
 */
export function shapeOf(columns: ColumnRead[]): string {
  const names = columns.map(column => [column.name.normalize('NFKC').toLowerCase().replace(/\s+/g, ' ').trim(), column.unit])
  while (names.length > 0 && names.at(-1)!.every(text => text === '') && columns[names.length - 1]!.filled === 0) names.pop()
  return bytesToHex(sha256(utf8ToBytes(JSON.stringify(['moorage-shape', 1, names]))))
}

/**
 * What of a reading holds for the next file of its shape: meanings, marks and standing rules. Lines, encodings and names belong to one file.
 * @param reading - a reading without open questions
 * @param choices - the choices it was read with
 * @returns choices for the next file; what was only guessed becomes chosen
 */
export function mappingOf(reading: Reading, choices: ReadingChoices): ReadingChoices {
  const shown = (id: string) => reading.guesses.find(guess => guess.id === id)
  const of = (id: string): ReadingChoices => {
    const guess = shown(id)
    return (guess?.options.find(option => option.label === guess.shown)?.choices ?? {}) as ReadingChoices
  }
  const columns = Object.fromEntries(reading.columns.filter(column => column.filled > 0).map(column => [String(column.index), column.meaning]))
  const { missingN, zeroError, duplicates, ragged, fillDown, errorScale } = choices
  const standing = Object.fromEntries(Object.entries({ missingN, zeroError, duplicates, ragged, fillDown, errorScale }).filter(([, value]) => value !== undefined))
  // The mark is kept only where a person chose it: it is found again in each file, and a settled mark refuses what does not fit.
  return { ...standing, ...(choices.decimal ? { decimal: choices.decimal } : {}), columns, ...of('time'), ...of('ratio'), ...(reading.guesses.some(guess => guess.id === 'header' && guess.shown === 'none') ? { headerLine: null } : {}) }
}
