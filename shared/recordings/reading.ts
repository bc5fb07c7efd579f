/** How a file was read: what was found, what was guessed, what must be asked. Plain JSON throughout. */
import type { FieldProblem } from '../schemas/problem'
import type { FoundStimuli } from './stimuli'
import type { ChoiceEffect, TraceMeasure, TraceSettings } from './trace'
import type { ConditionData } from './types'
import type { StepWindows } from './windows'

export type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252'
export type Separator = ',' | ';' | '\t'
export type Decimal = '.' | ','
/** `certain`: nothing else fits; `guess`: shown to be confirmed; `asked`: must be answered; `chosen`: a person said so. */
export type Sure = 'certain' | 'guess' | 'asked' | 'chosen'

export const MEANINGS = [
  'interval', 'ratio', 'sd', 'sem', 'half-width', 'lower-limit', 'upper-limit', 'n', 'cell', 'condition', 'protocol', 'manipulation', 'first', 'second', 'aside',
  'time', 'capacitance', 'command', 'ignore',
] as const
export type Meaning = typeof MEANINGS[number]
/** What an unlabelled length of bar may be: the three that are asked for. */
export const ERROR_KINDS = ['sem', 'sd', 'half-width'] as const satisfies Meaning[]

export interface ColumnRead {
  /** From 0. */
  index: number
  /** As in a spreadsheet: A, B … AA. */
  letter: string
  /** As in the header; empty where there is none. */
  name: string
  /** As in the header or the unit line; empty where there is none. */
  unit: string
  meaning: Meaning
  sure: Sure
  sentence: string
  /** Data lines in which it holds something [count]. */
  filled: number
}
/** The part of the choices that an answer or a change sets. */
export interface Option { label: string, choices: Record<string, unknown> }
export interface Guess {
  id: string
  label: string
  /** What it was read as, for people. */
  shown: string
  sure: Sure
  sentence: string
  options: Option[]
}
export interface Question {
  id: string
  sentence: string
  /** False: the reading can be kept without an answer, and says what is then assumed. */
  must: boolean
  lines: number[]
  options: Option[]
  /** Index of the option that looks right; null where nothing speaks for one. */
  suggested: number | null
}
export interface Warning { id: string, sentence: string, lines: number[] }

export type LineKind = 'header' | 'point' | 'title' | 'blank' | 'empty' | 'unit' | 'again' | 'remark' | 'refused' | 'ragged' | 'lost' | 'chosen' | 'open'
export interface KeptValues {
  condition: string
  cell: string | null
  intervalMs: number
  ratio: number | null
  sd: number | null
  sem: number | null
  n: number | null
  first: number | null
  /** The file itself says why it stays out of fits; null where it counts. */
  aside: string | null
}
export interface LineRead {
  line: number
  cells: string[]
  kind: LineKind
  /** What the preview writes beside it; empty for a point. */
  remark: string
  /** As it would be kept; null where nothing is. */
  kept: KeptValues | null
}
export interface ConditionCount { condition: string, points: number, cells: number, rows: number, empty: number }

/** What a trace gives; its samples stay apart, since they are no JSON. */
export interface TraceReport {
  samples: number
  sampleS: number
  fromS: number
  toS: number
  found: FoundStimuli
  /** Null while two stimuli are neither found nor typed. */
  settings: TraceSettings | null
  windows: StepWindows[]
  measure: TraceMeasure | null
  effects: ChoiceEffect[]
}

export interface Reading {
  kind: 'summary' | 'cells' | 'trace'
  /** Lines of the file [count]. */
  fileLines: number
  columns: ColumnRead[]
  guesses: Guess[]
  questions: Question[]
  /** Every line of the file; of a trace or a preview only the first. */
  lines: LineRead[]
  warnings: Warning[]
  /** Why nothing can be kept; empty where something can. */
  problems: FieldProblem[]
  /** Spellings that stand for nothing, each with its count. */
  missing: Record<string, number>
  setAside: { line: number, reason: string }[]
  conditions: ConditionData[]
  /** Of a trace only. */
  trace: TraceReport | null
  counts: ConditionCount[]
  /** “11 points read; 7 of 19 lines set aside, each with its reason.” */
  sentence: string
  /** Digest of the header's shape: files of one shape may be read by one mapping. */
  shape: string
  /** Nothing is left that must be answered, and something can be kept. */
  ready: boolean
}
