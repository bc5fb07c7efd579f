/** Runs a command line as a person does: its own process, its own streams. */
import { spawn } from 'node:child_process'
import { mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

const ROOT = fileURLToPath(new URL('../../..', import.meta.url))
const folder = mkdtempSync(join(tmpdir(), 'moorage-scripts-'))
let files = 0

/** A file with this text, or with this document as JSON. */
export function fileWith(content: unknown): string {
  const file = join(folder, `scenario-${++files}.json`)
  writeFileSync(file, typeof content === 'string' ? content : JSON.stringify(content))
  return file
}

export interface Finished { code: number | null, out: string, problems: string }
/** Starts `scripts/<name>.ts`; `interruptAfterMs` sends SIGINT as Ctrl-C does. */
export function run(name: string, options: string[], interruptAfterMs?: number): Promise<Finished> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, ['--import', 'tsx', `scripts/${name}.ts`, ...options], { cwd: ROOT, env: { ...process.env, DATABASE_URL: '' } })
    const finished: Finished = { code: null, out: '', problems: '' }
    child.stdout.on('data', text => finished.out += text)
    child.stderr.on('data', text => finished.problems += text)
    child.on('error', reject)
    child.on('close', code => resolve({ ...finished, code }))
    if (interruptAfterMs !== undefined) setTimeout(() => child.kill('SIGINT'), interruptAfterMs)
  })
}
