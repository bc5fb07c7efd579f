/** Options of the command lines, strictly read: what is not understood is refused by name. */
import { parseArgs } from 'node:util'
import { SeedSchema } from '../../shared/schemas/api/run'
import type { AskedAlgorithm } from '../../shared/walk/types'
import { badInput } from './exits'

export interface Given { file: string, json: boolean, values: Record<string, string | undefined> }

/** Splits a command line into its one file, `--json` and named values. */
export function readOptions(usage: string, names: readonly string[], argv: readonly string[]): Given {
  const options = Object.fromEntries(names.map(name => [name, { type: 'string' as const }]))
  let parsed: { values: Record<string, unknown>, positionals: string[] }
  try {
    parsed = parseArgs({ args: [...argv], options: { ...options, json: { type: 'boolean' as const } }, allowPositionals: true, strict: true })
  } catch (thrown) {
    throw badInput('', `${(thrown as Error).message}\n${usage}`)
  }
  const [file, second] = parsed.positionals
  if (file === undefined) throw badInput('', `A scenario file is wanted.\n${usage}`)
  if (second !== undefined) throw badInput(second, `One file at a time.\n${usage}`)
  const { json, ...values } = parsed.values
  return { file, json: json === true, values: values as Record<string, string | undefined> }
}

/** A whole number in a range, or its default. */
export function wholeOption(name: string, text: string | undefined, [least, most]: readonly [number, number], otherwise: number): number {
  if (text === undefined) return otherwise
  const value = /^\d{1,12}$/.test(text.trim()) ? Number(text) : NaN
  if (value >= least && value <= most) return value
  throw badInput(name, `A whole number from ${least} to ${most} is wanted; “${text}” was read.`)
}

const ALGORITHMS: readonly AskedAlgorithm[] = ['auto', 'attempt', 'touch', 'step']
export function algorithmOption(text: string | undefined): AskedAlgorithm {
  const found = ALGORITHMS.find(one => one === (text ?? 'auto'))
  if (found) return found
  throw badInput('algorithm', `One of ${ALGORITHMS.join(', ')} is wanted; “${text}” was read.`)
}

/** A seed is kept exactly as given; without one, or with an empty one, a seed is made. */
export function seedOption(text: string | undefined): string {
  if (text === undefined || text === '') return Array.from(crypto.getRandomValues(new Uint8Array(10)), byte => (byte % 36).toString(36)).join('')
  const parsed = SeedSchema.safeParse(text)
  if (parsed.success) return parsed.data
  throw badInput('seed', parsed.error.issues[0]!.message)
}
