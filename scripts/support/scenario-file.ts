/** Reads a scenario document from a file, for the command lines. */
import { readFileSync, statSync } from 'node:fs'
import { fieldProblems } from '../../shared/schemas/problem'
import { ScenarioSchema, type Scenario } from '../../shared/schemas/scenario'
import { BadInput, badInput } from './exits'

/** A scenario is a page of text; anything larger is another file. */
const MOST_BYTES = 1_000_000

function readText(file: string): string {
  try {
    const { size } = statSync(file)
    if (size > MOST_BYTES) throw badInput(file, `This file has ${size} bytes; a scenario has at most ${MOST_BYTES}.`)
    return readFileSync(file, 'utf8').replace(/^\uFEFF/, '')
  } catch (thrown) {
    if (thrown instanceof BadInput) throw thrown
    const { code } = thrown as NodeJS.ErrnoException
    const words = code === 'ENOENT' ? 'There is no such file.' : code === 'EISDIR' ? 'This is a folder; a scenario file is wanted.' : code === 'EACCES' ? 'This file may not be read.' : `This file cannot be read (${code}).`
    throw badInput(file, words)
  }
}

/**
 * Reads and checks a scenario.
 * @param file - path of a `moorage-scenario` JSON document
 * @returns the scenario with defaults filled in
 * @throws BadInput with the path of every field that is wrong
 */
export function readScenario(file: string): Scenario {
  const text = readText(file)
  let document: unknown
  try {
    document = JSON.parse(text)
  } catch (thrown) {
    throw badInput(file, text.trim() === '' ? 'This file is empty.' : `This is not JSON: ${(thrown as Error).message}.`)
  }
  const parsed = ScenarioSchema.safeParse(document)
  if (parsed.success) return parsed.data
  throw new BadInput(fieldProblems(parsed.error.issues).map(problem => problem.path === '' ? { path: file, message: `A scenario document is wanted here. ${problem.message}` } : problem))
}
