/** A trace to a reading: samples, stimuli, windows, and the one ratio that they give. */
import type { ReadingChoices } from './choices'
import { meansOfCells, UNNAMED } from './conditions'
import type { Frame } from './frame'
import { RowPieces } from './pieces'
import type { Question, Reading, Separator, TraceReport } from './reading'
import { findStimuli, type FoundStimuli } from './stimuli'
import { DEFAULT_WINDOWS, effectOfChoices, measureTrace, type Stimulus, type TraceSettings } from './trace'
import { TraceSamples, type Trace, type TraceRead } from './trace-samples'
import { UNTOUCHED, type CellPoint, type ConditionData } from './types'

/** Text that is split at once [characters]. */
const PIECE = 65_536

/** Samples of a text, piece by piece, so that a long trace is never held as rows. */
function samplesOf(text: string, frame: Frame, separator: Separator): TraceRead & { lines: number, unclosed: RowPieces['unclosed'] } {
  const pieces = new RowPieces(separator), samples = new TraceSamples(frame)
  for (let from = 0; from < text.length; from += PIECE) samples.rows(pieces.push(text.slice(from, from + PIECE)))
  samples.rows(pieces.end())
  return { ...samples.done(), lines: pieces.lines, unclosed: pieces.unclosed }
}

const seconds = (value: number) => String(Number(value.toFixed(4)))
const span = ({ startS, endS }: Stimulus) => `${seconds(startS)} to ${seconds(endS)} s`

/** Which two stimuli are meant, where there are not just two. */
function stimuliQuestion({ stimuli, sentence }: FoundStimuli, choices: ReadingChoices): Question[] {
  if (choices.trace?.stimuli || stimuli.length === 2) return []
  const options = stimuli.slice(0, 20).flatMap((first, i) => {
    const second = stimuli[i + 1]
    return second ? [{ label: `${span(first)} and ${span(second)}`, choices: { trace: { ...choices.trace, stimuli: [first, second] } } }] : []
  })
  return [{ id: 'stimuli', must: true, lines: [], sentence: `Two stimuli are wanted. ${sentence}`, options, suggested: null }]
}

function settingsOf(found: FoundStimuli, choices: ReadingChoices): TraceSettings | null {
  const { stimuli: typed, cell: _, ...windows } = choices.trace ?? {}
  const [first, second] = found.stimuli, pair = typed ?? (found.stimuli.length === 2 ? [first!, second!] as [Stimulus, Stimulus] : null)
  const given = Object.fromEntries(Object.entries(windows).filter(([, value]) => value !== undefined))
  return pair && { ...DEFAULT_WINDOWS, ...given, stimuli: pair }
}

function conditionOf(point: CellPoint, choices: ReadingChoices): ConditionData {
  return { condition: choices.condition ?? UNNAMED.condition, protocol: choices.protocol ?? UNNAMED.protocol, manipulation: choices.manipulation ?? UNTOUCHED, points: meansOfCells([point]), cells: [point] }
}

/**
 * Reads a trace by the frame of its first rows.
 * @param text - the whole text
 * @param frame - columns and marks
 * @param separator - as found or chosen
 * @param choices - stimuli, windows, names
 * @param blank - the reading so far
 * @returns the reading with its trace report, and the samples for drawing [s, fF, mV]
 */
export function readTrace(text: string, frame: Frame, separator: Separator, choices: ReadingChoices, blank: Reading): { reading: Reading, trace: Trace | null } {
  const { trace, warnings, problems: odd, refused, lines, unclosed } = samplesOf(text, frame, separator)
  const fileProblems = unclosed ? [{ path: 'file', message: unclosed.sentence }] : odd
  const setAside = refused.map(({ line, reason }) => ({ line, reason: `refused: ${reason}`.slice(0, 300) }))
  const reading: Reading = { ...blank, fileLines: lines, warnings, setAside, problems: fileProblems, sentence: fileProblems[0]?.message ?? `A trace of ${trace.timeS.length} samples.` }
  if (fileProblems.length > 0) return { reading, trace: null }
  const found = findStimuli(trace), settings = settingsOf(found, choices), questions = [...blank.questions, ...stimuliQuestion(found, choices)]
  const report: TraceReport = { samples: trace.timeS.length, sampleS: trace.sampleS, fromS: trace.timeS[0]!, toS: trace.timeS.at(-1)!, found, settings, windows: [], measure: null, effects: [] }
  if (!settings) return { reading: { ...reading, questions, trace: report }, trace }
  const read = measureTrace(trace, settings)
  if (!read.ok) return { reading: { ...reading, questions, problems: read.problems, trace: { ...report, windows: read.windows } }, trace }
  const { measure } = read, { ratio, intervalMs, steps: [first] } = measure
  const flat = ratio === null ? [{ path: 'trace.stimuli.0', message: 'The first step is not above 0, so there is no ratio.' }] : []
  const conditions = ratio === null ? [] : [conditionOf({ cell: choices.trace?.cell ?? 'cell 1', intervalMs, ratio, first: first.stepFf, aside: null, line: null }, choices)]
  return {
    trace, reading: {
      ...reading, questions, problems: flat, conditions, counts: conditions.map(({ condition }) => ({ condition, points: 1, cells: 1, rows: 1, empty: 0 })),
      trace: { ...report, windows: measure.steps.map(step => step.windows), measure, effects: effectOfChoices(trace, settings) }, ready: flat.length === 0 && !questions.some(question => question.must),
    },
  }
}
