/** The production build: made when it is missing or older than what it was made from. */
import { createHash } from 'node:crypto'
import { existsSync, readFileSync, readdirSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { ROOT, lastLines, run, tool } from './run.mjs'
import { Refusal, duration, say } from './say.mjs'

const INPUTS = ['app', 'server', 'shared', 'workers', 'public', 'nuxt.config.ts', 'tailwind.config.ts', 'tsconfig.json', 'package.json', 'package-lock.json']
const STAMP = join(ROOT, '.output/inputs.sha256')

function* filesUnder(path) {
  if (!existsSync(path)) return
  if (statSync(path).isFile()) {
    yield path
    return
  }
  for (const name of readdirSync(path).sort()) yield* filesUnder(join(path, name))
}

/**
 * Digest of files and folders of the checkout, names and contents.
 * @param {string[]} paths from the checkout's root; what is missing counts as empty
 * @returns {string} lower-case hex
 */
export function digestOf(paths) {
  const hash = createHash('sha256')
  for (const input of paths) {
    for (const file of filesUnder(join(ROOT, input))) {
      const content = readFileSync(file)
      hash.update(`${file.slice(ROOT.length)}\0${content.length}\0`)
      hash.update(content)
    }
  }
  return hash.digest('hex')
}

/** Digest of everything that the build is made from. @returns {string} lower-case hex */
export const inputsDigest = () => digestOf(INPUTS)

/** Digest of the inputs of the build that stands in .output. @returns {string | null} null when there is none */
export function builtDigest() {
  return existsSync(STAMP) && existsSync(join(ROOT, '.output/server/index.mjs')) ? readFileSync(STAMP, 'utf8') : null
}

/** Without telemetry and without settings of a database or a session, none of which a build may hold. */
export const buildEnvironment = () => {
  const environment = { ...process.env, NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' }
  for (const name of Object.keys(environment)) if (name.startsWith('NUXT_') && name !== 'NUXT_TELEMETRY_DISABLED') delete environment[name]
  return environment
}

/** The part of a long output that tells what went wrong: from the first error on, else its end. */
function tellingPart(output) {
  const lines = output.split('\n')
  const first = lines.findIndex(line => /\berror\b/i.test(line))
  return first < 0 ? lastLines(output, 30) : lines.slice(Math.max(0, first - 2), first + 20).join('\n')
}

/**
 * Builds when needed.
 * @returns {Promise<string>} digest of the build's inputs
 */
export async function ensureBuild() {
  const wanted = inputsDigest()
  if (builtDigest() === wanted) return wanted
  const started = Date.now()
  say('Building the application (about half a minute) …')
  const { status, output } = await run(tool('nuxt'), ['build'], { env: buildEnvironment(), quiet: true })
  if (status !== 0 || !existsSync(join(ROOT, '.output/server/index.mjs')))
    throw new Refusal(`The application could not be built; "nuxt build" ended with ${status}. It says:\n${tellingPart(output)}`)
  writeFileSync(STAMP, wanted)
  say(`The application is built (${duration(Date.now() - started)}).`)
  return wanted
}
