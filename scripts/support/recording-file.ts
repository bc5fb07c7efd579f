/** Reads recordings for the command lines: the same reader as an upload, and what it would ask is refused with the option that answers. */
import { readFileSync, statSync } from 'node:fs'
import { parseArgs } from 'node:util'
import { readBytes } from '../../shared/recordings/read'
import type { ReadingChoices } from '../../shared/recordings/choices'
import type { Question } from '../../shared/recordings/reading'
import type { ConditionData } from '../../shared/recordings/types'
import { RECORDING_LIMITS } from '../../shared/schemas/recording'
import { BadInput, badInput } from './exits'

export const READING_USAGE = '[--decimal , | .] [--time ms|s] [--ratio percent|ratio]'
const READING_NAMES = ['decimal', 'time', 'ratio'] as const
/** Options that answer what a reading asks, by the question's name. */
const ANSWERS: Record<string, string> = { decimal: '--decimal "," or --decimal "."', time: '--time ms or --time s', ratio: '--ratio percent or --ratio ratio' }

export interface GivenRecordings { files: string[], json: boolean, values: Record<string, string | undefined>, flags: Record<string, boolean>, choices: ReadingChoices }

function oneOf<T extends string>(name: string, text: string | undefined, allowed: readonly T[]): T | undefined {
  if (text === undefined) return undefined
  const found = allowed.find(one => one === text)
  if (found === undefined) throw badInput(name, `One of ${allowed.join(' or ')} is wanted; “${text}” was read.`)
  return found
}

/**
 * Splits a command line into recording files, values, flags, and how the files are to be read.
 * @param usage - told where the line is not understood
 * @param names - options with a value, without those of the reading
 * @param flagNames - options without a value, without `--json`
 * @param argv - after the script's name
 */
export function readRecordingOptions(usage: string, names: readonly string[], flagNames: readonly string[], argv: readonly string[]): GivenRecordings {
  const text = Object.fromEntries([...names, ...READING_NAMES].map(name => [name, { type: 'string' as const }]))
  const boolean = Object.fromEntries([...flagNames, 'json'].map(name => [name, { type: 'boolean' as const }]))
  let parsed: { values: Record<string, unknown>, positionals: string[] }
  try {
    parsed = parseArgs({ args: [...argv], options: { ...text, ...boolean }, allowPositionals: true, strict: true })
  } catch (thrown) {
    throw badInput('', `${(thrown as Error).message}\n${usage}`)
  }
  if (parsed.positionals.length === 0) throw badInput('', `A recording file is wanted.\n${usage}`)
  const values = Object.fromEntries(Object.entries(parsed.values).filter(([, value]) => typeof value === 'string')) as Record<string, string>
  const choices: ReadingChoices = {
    decimal: oneOf('decimal', values.decimal, [',', '.']), timeUnit: oneOf('time', values.time, ['ms', 's', 'min']), ratioScale: oneOf('ratio', values.ratio, ['percent', 'ratio']),
  }
  return { files: parsed.positionals, json: parsed.values.json === true, values, flags: Object.fromEntries(flagNames.map(name => [name, parsed.values[name] === true])), choices }
}

function bytesOf(file: string): Uint8Array {
  try {
    const { size } = statSync(file)
    if (size > RECORDING_LIMITS.fileBytes) throw badInput(file, `This file has ${size} bytes; a recording has at most ${RECORDING_LIMITS.fileBytes}.`)
    return new Uint8Array(readFileSync(file))
  } catch (thrown) {
    if (thrown instanceof BadInput) throw thrown
    const { code } = thrown as NodeJS.ErrnoException
    throw badInput(file, code === 'ENOENT' ? 'There is no such file.' : code === 'EISDIR' ? 'This is a folder; a recording file is wanted.' : code === 'EACCES' ? 'This file may not be read.' : `This file cannot be read (${code}).`)
  }
}

function askedText({ id, sentence, options }: Question): string {
  const answer = ANSWERS[id]
  if (answer) return `${sentence} Say which with ${answer}.`
  return `${sentence} It is settled where the file is uploaded${options.length > 0 ? ` (${options.map(one => one.label).join(', ')})` : ''}.`
}

/**
 * Conditions of a file.
 * @param file - path of a CSV that an upload would take
 * @param choices - how it is to be read
 * @returns conditions, and what a person should know of the reading
 * @throws BadInput where it cannot be read, or can be read in two ways
 */
export function readConditions(file: string, choices: ReadingChoices): { conditions: ConditionData[], notes: string[] } {
  const read = readBytes(bytesOf(file), choices)
  if (!read.ok) throw badInput(file, read.problem.message)
  const { reading } = read
  if (reading.kind === 'trace') throw badInput(file, 'This is a raw trace; its steps are measured where it is uploaded. A table of ratios is wanted here.')
  if (reading.problems.length > 0) throw new BadInput(reading.problems.map(({ message }) => ({ path: file, message })))
  const asked = reading.questions.filter(question => question.must)
  if (asked.length > 0) throw new BadInput(asked.map(question => ({ path: file, message: askedText(question) })))
  if (!reading.ready) throw badInput(file, reading.sentence)
  const aside = reading.lines.filter(line => line.kind === 'refused' || line.kind === 'ragged').map(line => `line ${line.line} is left out, ${line.remark.replace(/^set aside: /, '')}`)
  return { conditions: reading.conditions, notes: [...aside, ...reading.warnings.map(({ sentence, lines }) => lines.length > 0 && !/^Lines? \d/.test(sentence) ? `${lines.length === 1 ? 'line' : 'lines'} ${lines.slice(0, 5).join(', ')}${lines.length > 5 ? ' …' : ''}: ${sentence}` : sentence)] }
}
