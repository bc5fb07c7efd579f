/** Reads a scenario from a JSON file: what is wrong is said with its path before anything is sent. */
import { fieldProblems, type FieldProblem } from '#shared/schemas/problem'
import { ScenarioSchema, type Scenario } from '#shared/schemas/scenario'

/** What the server takes in one body [bytes]; a larger file is not even read. */
const LARGEST_BYTES = 262_144

export interface ImportReading { name: string, scenario?: Scenario, problems: FieldProblem[] }

/** Judges the text of a file. A whole outcome or another kind of document is named as such. */
export function readScenarioText(name: string, text: string): ImportReading {
  let given: unknown
  try {
    given = JSON.parse(text)
  } catch (thrown) {
    return { name, problems: [{ path: '', message: `This is not JSON: ${thrown instanceof Error ? thrown.message : 'it could not be read'}.` }] }
  }
  const format = (given as { format?: unknown } | null)?.format
  if (format !== 'moorage-scenario') return { name, problems: [{ path: 'format', message: `A document of format “moorage-scenario” is wanted; this one says ${format === undefined ? 'nothing' : `“${String(format).slice(0, 40)}”`}.` }] }
  const parsed = ScenarioSchema.safeParse(given)
  return parsed.success ? { name, scenario: parsed.data, problems: [] } : { name, problems: fieldProblems(parsed.error.issues) }
}

export async function readScenarioFile(file: File): Promise<ImportReading> {
  if (file.size > LARGEST_BYTES) return { name: file.name, problems: [{ path: '', message: `This file has ${Math.ceil(file.size / 1024)} kB; a scenario has at most ${LARGEST_BYTES / 1024} kB.` }] }
  if (file.size === 0) return { name: file.name, problems: [{ path: '', message: 'This file is empty.' }] }
  return readScenarioText(file.name, await file.text())
}
