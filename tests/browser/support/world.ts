/** The built server with a database of the test's own; with the invented demo bench where a test wants it. */
import { execFile } from 'node:child_process'
import { createRequire } from 'node:module'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { promisify } from 'node:util'
import type { ProvidedContext } from 'vitest'
import { openWorld, type World } from '../../support/bench'

const ROOT = fileURLToPath(new URL('../../..', import.meta.url))
const LOADER = pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href
const execute = promisify(execFile)

/** One of the project's own scripts, as its commands run it. */
export async function runScript(script: string, words: string[] = [], env: Record<string, string> = {}): Promise<string> {
  const { stdout } = await execute(process.execPath, ['--import', LOADER, `${ROOT}/scripts/${script}`, ...words], { cwd: ROOT, env: { PATH: process.env.PATH, ...env }, maxBuffer: 1e8 })
  return stdout
}

/** A world whose sign-in page offers the accounts of the invented bench. */
export async function openDemoWorld(cluster: ProvidedContext['cluster']): Promise<World> {
  const world = await openWorld(cluster, { NUXT_DEMO_ACCOUNTS: 'true', NUXT_PUBLIC_DEMO_ACCOUNTS: 'true' })
  try {
    await runScript('seed.ts', [], { NUXT_DATABASE_URL: world.database.applicationUrl })
  } catch (error) {
    await world.end()
    throw error
  }
  return world
}
