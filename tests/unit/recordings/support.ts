/** Short ways to read a text or a fixture in tests. */
import { readFileSync } from 'node:fs'
import type { ReadingChoices } from '../../../shared/recordings/choices'
import { readBytes, readRecording } from '../../../shared/recordings/read'

export const fixture = (name: string) => new Uint8Array(readFileSync(new URL(`../../../scripts/demo-data/${name}`, import.meta.url)))
export function readFixture(name: string, choices: ReadingChoices = {}) {
  const read = readBytes(fixture(name), choices)
  if (!read.ok) throw new Error(read.problem.message)
  return read.reading
}
export const bytesOf = (text: string) => new TextEncoder().encode(text)
/** A table of means with a plain header; rows are given as text. */
export const table = (rows: string[], header = 'interval_ms,ratio,sem,n') => [header, ...rows].join('\n')
/** Four plain points, so that one odd row stands among others. */
export const PLAIN = ['50,0.150,0.008,9', '100,0.181,0.019,8', '200,0.243,0.010,9', '400,0.332,0.015,9']
export const read = (text: string, choices: ReadingChoices = {}) => readRecording(text, choices)
export const lineOf = (reading: ReturnType<typeof readRecording>, line: number) => reading.lines.find(one => one.line === line)
export const questionIds = (reading: ReturnType<typeof readRecording>) => reading.questions.map(question => question.id)
export const warningIds = (reading: ReturnType<typeof readRecording>) => reading.warnings.map(warning => warning.id)
