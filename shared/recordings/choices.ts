/** What a person chose of a reading; everything left out is guessed. Kept with the recording, so that it reads so again. */
import { z } from 'zod'
import { fieldProblems, type FieldProblem } from '../schemas/problem'
import { MEANINGS } from './reading'

const stimulus = z.strictObject({ startS: z.number().min(0), endS: z.number().min(0) })
/** Windows of a trace; each left out has its usual length. */
const TraceChoicesSchema = z.strictObject({
  stimuli: z.tuple([stimulus, stimulus]).optional(),
  baselineMs: z.number().min(1).max(60_000).optional(),
  skipMs: z.number().min(0).max(60_000).optional(),
  measureMs: z.number().min(1).max(60_000).optional(),
  subtractSlope: z.boolean().optional(),
  /** Name of the cell that the trace is of. */
  cell: z.string().min(1).max(120).optional(),
})
const line = z.number().int().min(1)

export const ReadingChoicesSchema = z.strictObject({
  encoding: z.enum(['utf-8', 'utf-16le', 'utf-16be', 'windows-1252']).optional(),
  separator: z.enum([',', ';', '\t']).optional(),
  decimal: z.enum(['.', ',']).optional(),
  /** Line of the header; null says that there is none. */
  headerLine: line.nullable().optional(),
  /** Line of the units; null says that there is none. */
  unitLine: line.nullable().optional(),
  /** By column index as text: `{"0": "interval"}`. */
  columns: z.record(z.string().regex(/^(0|[1-9]\d{0,2})$/, 'A column is a whole number from 0.'), z.enum(MEANINGS)).optional(),
  timeUnit: z.enum(['ms', 's', 'min']).optional(),
  ratioScale: z.enum(['ratio', 'percent']).optional(),
  /** Scale of SD, SEM and limits; that of the ratio where nothing is said. */
  errorScale: z.enum(['ratio', 'percent']).optional(),
  /** n for every point that has none; null says that it is not known. */
  missingN: z.number().int().min(1).max(100_000).nullable().optional(),
  /** An error of 0: not known, or the smallest that is above 0 in its condition. */
  zeroError: z.enum(['missing', 'smallest']).optional(),
  /** Two rows of one interval: two points, or one weighted by n. */
  duplicates: z.enum(['keep', 'merge']).optional(),
  /** Run-down of the first response: left as measured, or taken out where it is clear. */
  runDown: z.enum(['as-measured', 'corrected']).optional(),
  /** Rows with too few or too many cells. */
  ragged: z.enum(['take', 'leave']).optional(),
  /** Names that stand only in the first of several rows hold for the rows below. */
  fillDown: z.boolean().optional(),
  /** Lines that a person took out, by line as text, each with its reason. */
  leftOut: z.record(z.string().regex(/^[1-9]\d*$/, 'A line is a whole number from 1.'), z.string().min(1).max(200)).optional(),
  /** Name of the condition where the file names none. */
  condition: z.string().min(1).max(120).optional(),
  protocol: z.string().min(1).max(120).optional(),
  manipulation: z.string().min(1).max(120).optional(),
  trace: TraceChoicesSchema.optional(),
})
export type ReadingChoices = z.output<typeof ReadingChoicesSchema>

/**
 * Judges choices that came from outside.
 * @param input - any JSON
 * @returns the choices, or what is wrong with them, by path
 */
export function parseChoices(input: unknown): { ok: true, choices: ReadingChoices } | { ok: false, problems: FieldProblem[] } {
  const parsed = ReadingChoicesSchema.safeParse(input)
  if (parsed.success) return { ok: true, choices: parsed.data }
  return { ok: false, problems: fieldProblems(parsed.error.issues).map(one => ({ message: one.message === 'Invalid key in record' ? 'A column counts from 0 and a line from 1; this is neither.' : one.message, path: one.path ? `choices.${one.path}` : 'choices' })) }
}

/**
 * Choices with an answer added: columns, lines left out and trace windows are added to, all else is replaced.
 * @param choices - as they were
 * @param answer - the choices of an option
 * @returns new choices
 */
export function withAnswer(choices: ReadingChoices, answer: ReadingChoices): ReadingChoices {
  const joined = <K extends 'columns' | 'leftOut' | 'trace'>(key: K) => choices[key] || answer[key] ? { [key]: { ...choices[key], ...answer[key] } } : {}
  return { ...choices, ...answer, ...joined('columns'), ...joined('leftOut'), ...joined('trace') }
}
