/** Starts the built server on a free port against a test's database, and ends it. */
import { spawn } from 'node:child_process'
import { existsSync } from 'node:fs'
import { setTimeout as pause } from 'node:timers/promises'
import { fileURLToPath } from 'node:url'
import { freePort } from '../../scripts/support/cluster.mjs'

export const SERVER_SCRIPT = process.env.MOORAGE_SERVER ?? fileURLToPath(new URL('../../.output/server/index.mjs', import.meta.url))
const READY_MS = 30_000

export interface TestServer {
  base: string
  /** What it wrote so far. */
  log: () => string
  stop: () => Promise<void>
}

/** Cheap hashes and generous limits, as most tests are not about them. */
const TEST_SETTINGS = {
  NUXT_SESSION_PASSWORD: 'only-for-tests-only-for-tests-only-for-tests', NUXT_HASH_SCRYPT_COST: '1024',
  NUXT_THROTTLE_PER_ACCOUNT: '1000000', NUXT_THROTTLE_PER_ADDRESS: '1000000', NUXT_THROTTLE_REFUSE_AFTER: '1000000', NUXT_DEMO_ACCOUNTS: 'true',
}

export async function startServer(applicationUrl: string, settings: Record<string, string> = {}): Promise<TestServer> {
  if (!existsSync(SERVER_SCRIPT)) throw new Error(`There is no built server at ${SERVER_SCRIPT}: run npm run build first.`)
  const port = await freePort()
  const child = spawn(process.execPath, [SERVER_SCRIPT], {
    env: { PATH: process.env.PATH, NODE_ENV: 'production', HOST: '127.0.0.1', PORT: String(port), NUXT_DATABASE_URL: applicationUrl, ...TEST_SETTINGS, ...settings },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let written = ''
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => written += chunk.toString())
  const base = `http://127.0.0.1:${port}`
  const ended = new Promise<void>(resolve => child.once('exit', () => resolve()))
  const stop = async () => {
    child.kill('SIGTERM')
    const gone = await Promise.race([ended.then(() => true), pause(5000, false)])
    if (!gone) child.kill('SIGKILL')
    await ended
  }
  for (const until = Date.now() + READY_MS; Date.now() < until && child.exitCode === null; await pause(50)) {
    const answer = await fetch(`${base}/api/health`).catch(() => null)
    if (answer?.ok) return { base, stop, log: () => written }
  }
  await stop()
  throw new Error(`The built server was not ready within ${READY_MS / 1000} s. It wrote:\n${written}`)
}
