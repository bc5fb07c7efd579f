/** Bytes to text: which encoding, how sure that is, and where bytes do not fit it. */
import { RECORDING_LIMITS } from '../schemas/recording'
import type { FieldProblem } from '../schemas/problem'
import { bareUtf16, foreignContent } from './content'
import type { Encoding, Sure } from './reading'

export interface Decoded {
  text: string
  encoding: Encoding
  byteOrderMark: boolean
  sure: Sure
  /** Why it was read so. */
  sentence: string
  /** First byte that is no UTF-8: offset from 0 [bytes], line from 1; null where all fit. */
  misfit: { offset: number, line: number } | null
}
export type DecodeOutcome = { ok: true, decoded: Decoded } | { ok: false, problem: FieldProblem }

/** Windows-1252 from 0x80 to 0x9F; the rest is Latin-1. Zero: the byte stands for nothing. */
const FROM_80 = [0x20AC, 0, 0x201A, 0x0192, 0x201E, 0x2026, 0x2020, 0x2021, 0x02C6, 0x2030, 0x0160, 0x2039, 0x0152, 0, 0x017D, 0,
  0, 0x2018, 0x2019, 0x201C, 0x201D, 0x2022, 0x2013, 0x2014, 0x02DC, 0x2122, 0x0161, 0x203A, 0x0153, 0, 0x017E, 0x0178]
const PIECE = 8192 // arguments of one call; engines allow far more

function fromWindows1252(bytes: Uint8Array): string {
  const pieces: string[] = []
  for (let from = 0; from < bytes.length; from += PIECE) {
    const codes = Array.from(bytes.subarray(from, from + PIECE), byte => byte >= 0x80 && byte < 0xA0 ? FROM_80[byte - 0x80]! || 0xFFFD : byte)
    pieces.push(String.fromCharCode(...codes))
  }
  return pieces.join('')
}

/** Length of the well-formed UTF-8 sequence at a place, 0 where there is none (table 3-7 of the Unicode standard) [bytes]. */
function sequenceAt(bytes: Uint8Array, at: number): number {
  const first = bytes[at]!
  if (first < 0x80) return 1
  const length = first >= 0xC2 && first <= 0xDF ? 2 : first >= 0xE0 && first <= 0xEF ? 3 : first >= 0xF0 && first <= 0xF4 ? 4 : 0
  if (length === 0 || at + length > bytes.length) return 0
  const second = bytes[at + 1]!
  const low = first === 0xE0 ? 0xA0 : first === 0xF0 ? 0x90 : 0x80, high = first === 0xED ? 0x9F : first === 0xF4 ? 0x8F : 0xBF
  if (second < low || second > high) return 0
  for (let i = 2; i < length; i++) if ((bytes[at + i]! & 0xC0) !== 0x80) return 0
  return length
}

/** Misfits, whole sequences beyond ASCII, and whether every misfit stands for a character of Windows-1252. */
function survey(bytes: Uint8Array): { first: number, sequences: number, western: boolean } {
  let first = -1, sequences = 0, western = true
  for (let i = 0; i < bytes.length;) {
    const length = sequenceAt(bytes, i)
    if (length > 1) sequences++
    if (length === 0) {
      if (first < 0) first = i
      if (bytes[i]! < 0xA0 && FROM_80[bytes[i]! - 0x80] === 0) western = false
    }
    i += Math.max(1, length)
  }
  return { first, sequences, western }
}

const lineAt = (bytes: Uint8Array, offset: number): number => {
  const before = bytes.subarray(0, offset)
  let feeds = 0, returns = 0
  for (const byte of before) if (byte === 10) feeds++; else if (byte === 13) returns++
  return 1 + Math.max(feeds, returns)
}

const lenient = (bytes: Uint8Array, encoding: string) => new TextDecoder(encoding).decode(bytes)

function markOf(bytes: Uint8Array): Encoding | null {
  if (bytes[0] === 0xEF && bytes[1] === 0xBB && bytes[2] === 0xBF) return 'utf-8'
  if (bytes[0] === 0xFF && bytes[1] === 0xFE) return 'utf-16le'
  return bytes[0] === 0xFE && bytes[1] === 0xFF ? 'utf-16be' : null
}

/** UTF-8 with misfits: Windows-1252 where every byte beyond ASCII says so, else a question. */
function withMisfits(bytes: Uint8Array): Decoded {
  const { first, sequences, western } = survey(bytes), line = lineAt(bytes, first)
  const place = `Byte ${first + 1}, on line ${line}, is no UTF-8`
  const shown = western ? `; in Windows-1252 it is “${fromWindows1252(bytes.subarray(first, first + 1))}”` : ''
  const plain = western && sequences === 0
  return {
    text: fromWindows1252(bytes), encoding: 'windows-1252', byteOrderMark: false, sure: plain ? 'guess' : 'asked',
    sentence: plain ? `${place}${shown}, and so is every byte beyond ASCII.` : `${place}${shown}, yet other bytes do not fit Windows-1252 alone; which encoding is meant?`,
    misfit: { offset: first, line },
  }
}

function decodeAs(bytes: Uint8Array, encoding: Encoding): Decoded {
  const { first } = encoding === 'utf-8' ? survey(bytes) : { first: -1 }
  const misfit = first < 0 ? null : { offset: first, line: lineAt(bytes, first) }
  return {
    text: encoding === 'windows-1252' ? fromWindows1252(bytes) : lenient(bytes, encoding), encoding, byteOrderMark: markOf(bytes) === encoding, sure: 'chosen', misfit,
    sentence: misfit ? `Chosen; bytes that do not fit are shown as \uFFFD, the first on line ${misfit.line}.` : 'Chosen.',
  }
}

function guessed(bytes: Uint8Array): Decoded {
  const mark = markOf(bytes), bare = mark === null ? bareUtf16(bytes) : null
  if (mark !== null && mark !== 'utf-8') return { ...decodeAs(bytes, mark), sure: 'certain', sentence: 'The byte order mark says so.' }
  if (bare) return { ...decodeAs(bytes, bare), sure: 'guess', sentence: 'Every second byte is zero, and there is no byte order mark.' }
  try {
    const text = new TextDecoder('utf-8', { fatal: true }).decode(bytes)
    return { text, encoding: 'utf-8', byteOrderMark: mark === 'utf-8', sure: 'certain', misfit: null, sentence: mark ? 'The byte order mark says so.' : 'Every byte fits.' }
  } catch {
    const read = withMisfits(mark ? bytes.subarray(3) : bytes)
    return mark ? { ...decodeAs(bytes, 'utf-8'), sure: 'asked', sentence: read.sentence } : read
  }
}

/**
 * Reads bytes as text. Refuses what is empty, too large, or no text by its content.
 * @param bytes - the whole file
 * @param encoding - an encoding that a person chose; bytes that do not fit it become U+FFFD
 * @returns the text with how it was read, or a problem with a whole sentence
 */
export function decodeBytes(bytes: Uint8Array, encoding?: Encoding): DecodeOutcome {
  const refuse = (message: string): DecodeOutcome => ({ ok: false, problem: { path: 'file', message } })
  const tooLarge = sizeProblem(bytes.length)
  if (tooLarge) return { ok: false, problem: tooLarge }
  const foreign = foreignContent(bytes)
  if (foreign) return refuse(foreign)
  const decoded = encoding ? decodeAs(bytes, encoding) : guessed(bytes)
  const text = decoded.text.replace(/^\uFEFF/, '')
  return text.trim() === '' ? refuse('This file has no rows.') : { ok: true, decoded: { ...decoded, text } }
}

/**
 * Why a file of this size is not taken; to be asked before a byte is read.
 * @param size - length of the file [bytes]
 * @returns the problem, or null
 */
export function sizeProblem(size: number): FieldProblem | null {
  const limit = RECORDING_LIMITS.fileBytes / 2 ** 20
  if (size === 0) return { path: 'file', message: 'This file is empty: it has no rows.' }
  if (size <= RECORDING_LIMITS.fileBytes) return null
  return { path: 'file', message: `This file has ${Math.ceil(size / 2 ** 20)} MB; at most ${limit} MB are taken.` }
}
