/** What a person says of a recording, and how its file was read. */
import { z } from 'zod'
import { neutraliseText } from './text'

export const RECORDING_LIMITS = {
  /** Original bytes that are kept at most [bytes]. */
  fileBytes: 25 * 2 ** 20,
  titleLength: 200, nameLength: 120, notesLength: 10_000, textLength: 200,
  /** Measured rows of one recording [count]. */
  points: 20_000,
} as const

const line = (most: number) => z.string().transform(neutraliseText).pipe(z.string().max(most, `At most ${most} characters.`))
const named = (what: string, most: number) => z.string().transform(neutraliseText).pipe(z.string().min(1, `${what} is wanted.`).max(most, `At most ${most} characters.`))

/** What an interval is counted between. The first is the product's own; the others are converted by the first stimulus' length before anything is fitted. */
export const INTERVAL_CONVENTIONS = ['end-to-start', 'start-to-start'] as const

/** Protocol details; empty texts and nulls where nothing was said. */
export const RecordingDetailsSchema = z.strictObject({
  firstStimulus: line(RECORDING_LIMITS.textLength).default(''),
  intervalConvention: z.enum(INTERVAL_CONVENTIONS).default('end-to-start'),
  temperatureC: z.number().min(-10, 'At least -10 °C.').max(60, 'At most 60 °C.').nullable().default(null),
  solution: line(RECORDING_LIMITS.textLength).default(''),
  animal: line(RECORDING_LIMITS.textLength).default(''),
  /** What n counts: decides what may be called independent. */
  experimentalUnit: z.enum(['cell', 'animal', 'slice', 'unknown']).default('cell'),
})
export type RecordingDetails = z.output<typeof RecordingDetailsSchema>

export const ConditionNamesSchema = z.strictObject({
  title: named('A title', RECORDING_LIMITS.titleLength),
  condition: named('A condition', RECORDING_LIMITS.nameLength),
  protocol: named('A protocol', RECORDING_LIMITS.nameLength),
  manipulation: named('A manipulation, or “none”,', RECORDING_LIMITS.nameLength),
})

/** How a file was read: the choices that read it so again, and what a person should know of it. */
export interface RecordingReading {
  choices: Record<string, unknown>
  /** One sentence each: what was guessed, what a person changed. */
  decisions: string[]
  /** Lines that were not taken as points. */
  setAside: { line: number, reason: string }[]
  /** Cells that were empty where a value could stand [count]. */
  empty: number
}
