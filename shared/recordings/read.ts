/** A file to a reading: what it holds, what was guessed, what must be asked, what would be kept. */
import type { FieldProblem } from '../schemas/problem'
import { RECORDING_LIMITS, type RecordingReading } from '../schemas/recording'
import type { ReadingChoices } from './choices'
import { MEANING_NAMES } from './columns'
import { makeConditions, type NamedLine } from './conditions'
import { decodeBytes, type Decoded } from './decode'
import { frameOf, type Frame } from './frame'
import { readLines } from './lines'
import { shapeOf } from './mapping'
import { alikeWarning, findRepeats, unsortedWarning } from './repeats'
import type { RowKind } from './layout'
import type { ColumnRead, Encoding, Guess, LineRead, Question, Reading, Separator } from './reading'
import { runDownWarning } from './rundown'
import { MOST_CELLS, lineEndsOf, shapelessness, splitRows, withFeeds, type SplitText } from './rows'
import { errorSentence } from './spread'
import { findSeparator } from './separator'
import { readTrace } from './trace-reading'
import type { Trace } from './trace-samples'
import { Tally, questionsOf, warningsOf } from './tally'

/** Lines of a trace that the preview shows [count]. */
const TRACE_LINES = 60
/** Rows of a trace from which its frame is settled [count]. */
const FRAME_ROWS = 2000
/** Text from which it is told whether a file is a trace [characters]. */
const HEAD_CHARACTERS = 200_000
const ENCODING_NAMES: Record<Encoding, string> = { 'utf-8': 'UTF-8', 'utf-16le': 'UTF-16, little end first', 'utf-16be': 'UTF-16, big end first', 'windows-1252': 'Windows-1252' }
const ENCODING_OPTIONS = Object.entries(ENCODING_NAMES).map(([encoding, label]) => ({ label, choices: { encoding } }))

function encodingGuess(decoded: Decoded): { guesses: Guess[], questions: Question[] } {
  const shown = `${ENCODING_NAMES[decoded.encoding]}${decoded.byteOrderMark ? ' with byte order mark' : ''}`
  const guess: Guess = { id: 'encoding', label: 'Encoding', shown, sure: decoded.sure, sentence: decoded.sentence, options: ENCODING_OPTIONS }
  const lines = decoded.misfit ? [decoded.misfit.line] : []
  return { guesses: [guess], questions: decoded.sure === 'asked' ? [{ id: 'encoding', must: true, lines, sentence: decoded.sentence, options: ENCODING_OPTIONS, suggested: null }] : [] }
}

function refusals(split: SplitText, frame: Frame, many?: number): FieldProblem[] {
  const refuse = (message: string): FieldProblem => ({ path: 'file', message })
  if (many !== undefined) return [refuse(`This file has ${many} lines; at most ${RECORDING_LIMITS.points} rows are kept in one recording.`)]
  const data = frame.layout.kinds.filter(kind => kind === 'data').length
  const wide = split.rows.find(row => row.cells.length > MOST_CELLS)
  if (split.unclosed) return [refuse(split.unclosed.sentence)]
  if (data === 0 && split.rows.every(row => row.cells.length < 2)) return [refuse('This file has a single column; an interval and a ratio are wanted in each row.')]
  if (data === 0) return [refuse('This file has no rows of numbers.')]
  if (wide) return [refuse(`Line ${wide.line} has ${wide.cells.length} cells; at most ${MOST_CELLS} are taken.`)]
  if (frame.kind !== 'trace' && data > RECORDING_LIMITS.points) return [refuse(`This table has ${data} rows; at most ${RECORDING_LIMITS.points} are kept in one recording.`)]
  const open = frame.questions.some(question => /^(?:column|twice)-/.test(question.id)), { interval, ratio, first, second } = frame.byMeaning
  if (frame.kind === 'trace' || open) return []
  if (!interval) return [refuse('No column is the interval; choose which one is.')]
  return ratio || (first && second) ? [] : [refuse('No column is the ratio, and there are no two responses to make it from; choose which one is.')]
}

const isAside = (line: LineRead) => !['header', 'point', 'open'].includes(line.kind)

function sentenceOf(kind: Reading['kind'], points: number, lines: LineRead[], fileLines: number): string {
  const aside = lines.filter(isAside).length, noun = kind === 'cells' ? 'measurement' : 'point'
  const open = lines.filter(line => line.kind === 'open').length
  if (open > 0) return `${open} rows wait until it is said what their columns hold.`
  const read = `${points} ${noun}${points === 1 ? '' : 's'} read`
  return aside === 0 ? `${read}; none of ${fileLines} lines set aside.` : `${read}; ${aside} of ${fileLines} lines set aside, each with its reason.`
}

function emptyReading(kind: Reading['kind'], split: SplitText, columns: ColumnRead[], kinds: RowKind[] = []): Omit<Reading, 'guesses' | 'questions' | 'problems'> {
  const lines = split.rows.slice(0, TRACE_LINES).map(({ line, cells }, i): LineRead => ({ line, cells: cells.slice(0, MOST_CELLS), kind: kinds[i] === 'data' ? 'point' : kinds[i] ?? 'point', remark: '', kept: null }))
  return { kind, fileLines: split.lines, columns, lines, warnings: [], missing: {}, setAside: [], conditions: [], trace: null, counts: [], sentence: '', shape: shapeOf(columns), ready: false }
}

/** Text, frame and rows: of a large trace only the first rows, of all else every one. */
function split(text: string, separator: Separator, choices: ReadingChoices): { split: SplitText, frame: Frame, many?: number } {
  const most = 2 * RECORDING_LIMITS.points, cut = text.length > HEAD_CHARACTERS ? text.lastIndexOf('\n', HEAD_CHARACTERS) + 1 : 0
  const head = splitRows(cut > 0 ? text.slice(0, cut) : text, separator), frame = frameOf(head.rows.slice(0, FRAME_ROWS), separator, choices)
  if (frame.kind === 'trace' || (cut === 0 && head.rows.length <= FRAME_ROWS)) return { split: head, frame }
  const whole = splitRows(text, separator, 1, most)
  // Far beyond what is kept: refused without looking at every row.
  return whole.rows.length >= most ? { split: whole, frame, many: whole.lines } : { split: whole, frame: frameOf(whole.rows, separator, choices) }
}

/**
 * Reads the text of a file, and gives the samples of a trace beside the reading.
 * @param original - the whole text, any line ends
 * @param choices - what a person chose; empty at first
 * @param decoded - how the bytes became this text, where there were bytes
 * @returns the reading, and the trace to draw [s, fF, mV]; null where the file is a table
 */
export function readWithTrace(original: string, choices: ReadingChoices = {}, decoded?: Decoded): { reading: Reading, trace: Trace | null } {
  const text = withFeeds(original)
  const shapeless = shapelessness(text)
  if (shapeless) return { reading: { ...emptyReading('summary', { rows: [], lines: 0, unclosed: null }, []), guesses: [], questions: [], problems: [{ path: 'file', message: shapeless }], sentence: shapeless }, trace: null }
  const { separator, guess: separatorGuess } = findSeparator(text, choices.separator), { split: rows, frame, many } = split(text, separator, choices)
  const encoding = decoded ? encodingGuess(decoded) : { guesses: [], questions: [] }
  const ends: Guess = { id: 'line-ends', label: 'Line ends', shown: lineEndsOf(original), sure: 'certain', sentence: 'As they stand in the file.', options: [] }
  const asked: Question[] = separatorGuess.sure === 'asked' ? [{ id: 'separator', must: true, lines: [], sentence: `${separatorGuess.sentence} Which is meant?`, options: separatorGuess.options, suggested: null }] : []
  const problems = refusals(rows, frame, many), questions = [...encoding.questions, ...asked, ...frame.questions]
  const blank: Reading = { ...emptyReading(frame.kind, rows, frame.columns, frame.layout.kinds), guesses: [...encoding.guesses, separatorGuess, ends, ...frame.guesses], questions, problems, sentence: problems[0]?.message ?? '' }
  if (problems.length > 0) return { reading: blank, trace: null }
  return frame.kind === 'trace' ? readTrace(text, frame, separator, choices, blank) : { reading: readTable(rows, frame, separator, choices, blank), trace: null }
}

/**
 * Reads the text of a file.
 * @param text - the whole text
 * @param choices - what a person chose; empty at first
 * @param decoded - how the bytes became this text, where there were bytes
 * @returns the reading; `ready` says whether it can be kept as it stands
 */
export function readRecording(text: string, choices: ReadingChoices = {}, decoded?: Decoded): Reading {
  return readWithTrace(text, choices, decoded).reading
}

const withErrorSentences = (columns: ColumnRead[], kept: NamedLine[]) => columns.map(column => (column.meaning === 'sem' || column.meaning === 'sd') && column.filled > 0
  ? { ...column, sentence: column.sentence + errorSentence(column.meaning, kept.map(line => line.kept.n)) }
  : column)

function readTable(split: SplitText, frame: Frame, separator: Separator, choices: ReadingChoices, blank: Reading): Reading {
  const tally = new Tally(), kind = frame.kind === 'cells' ? 'cells' as const : 'summary' as const
  const { lines, kept } = readLines(split.rows, frame, { columns: frame.byMeaning, marks: frame.marks, choices, kind, tally }, choices, separator)
  const named = { protocol: frame.byMeaning.protocol !== undefined, manipulation: frame.byMeaning.manipulation !== undefined }
  const { conditions, counts } = makeConditions(kept, kind, choices, named)
  const repeats = findRepeats(kept, kind, choices), questions = [...blank.questions, ...questionsOf(tally), ...repeats.questions]
  const rundown = choices.runDown === 'corrected' ? [] : conditions.flatMap(({ condition, cells }) => runDownWarning(condition, cells))
  const lost = counts.filter(count => count.empty > 0).map(count => ({ id: 'empty', lines: [], sentence: `${count.condition}: ${count.empty} of ${count.rows} empty. They count as lost, never as 0.` }))
  const problems = kept.length === 0 && !questions.some(one => one.must) ? [{ path: 'file', message: 'No line could be kept; each says why.' }] : []
  return {
    ...blank, columns: withErrorSentences(blank.columns, kept), lines, conditions, counts, questions, problems, missing: tally.missing, warnings: [...warningsOf(tally), ...repeats.warnings, ...unsortedWarning(kept), ...lost, ...rundown, ...alikeWarning(conditions.map(one => one.condition))],
    setAside: lines.filter(isAside).map(({ line, remark }) => ({ line, reason: remark.replace(/^set aside: /, '').slice(0, 300) })),
    sentence: sentenceOf(kind, kept.length, lines, split.lines), ready: problems.length === 0 && kept.length > 0 && !questions.some(one => one.must),
  }
}

/**
 * Reads the bytes of a file: as the server does, and as a page does with a small file.
 * @param bytes - the whole file
 * @param choices - what a person chose
 * @returns the reading, or why the bytes cannot be read at all
 */
export function readBytes(bytes: Uint8Array, choices: ReadingChoices = {}): { ok: true, reading: Reading, trace: Trace | null } | { ok: false, problem: FieldProblem } {
  const outcome = decodeBytes(bytes, choices.encoding)
  return outcome.ok ? { ok: true, ...readWithTrace(outcome.decoded.text, choices, outcome.decoded) } : outcome
}

/**
 * What is kept of a reading beside its points.
 * @param reading - a reading
 * @param choices - the choices it was read with
 * @returns choices, one sentence for each decision, lines set aside, cells that were empty [count]
 */
export function readingRecord(reading: Reading, choices: ReadingChoices): RecordingReading {
  const columns = reading.columns.filter(column => column.filled > 0).map(column => `Column ${column.letter}${column.name ? `, “${column.name}”` : ''}: ${MEANING_NAMES[column.meaning]}. ${column.sentence}`)
  const empty = reading.kind === 'cells' ? reading.counts.reduce((sum, count) => sum + count.empty, 0) : reading.lines.filter(line => line.kind === 'lost').length
  return { choices: { ...choices }, decisions: [...choices.runDown === 'corrected' ? ['Run-down: taken out of the ratios of every cell whose first response changes clearly.'] : [], ...reading.guesses.map(guess => `${guess.label}: ${guess.shown}. ${guess.sentence}`), ...columns], setAside: reading.setAside, empty }
}
