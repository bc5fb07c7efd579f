/** npm's packages: installed exactly as the lock says, and only when they are not. */
import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { ROOT, lastLines, run } from './run.mjs'
import { Refusal, duration, say } from './say.mjs'

const read = path => JSON.parse(readFileSync(path, 'utf8')).packages ?? {}

/**
 * Whether node_modules holds what the lock names. npm writes its own list there as the last act of an installation,
 * so that an interrupted one is told from a finished one.
 */
export function dependenciesMatch(root = ROOT) {
  const installedList = join(root, 'node_modules/.package-lock.json')
  if (!existsSync(installedList)) return false
  const installed = read(installedList)
  return Object.entries(read(join(root, 'package-lock.json'))).every(([path, wanted]) => {
    if (path === '' || wanted.link) return true
    const have = installed[path]
    if (!have) return Boolean(wanted.optional || wanted.devOptional || wanted.peer)
    return have.version === wanted.version && have.integrity === wanted.integrity
  })
}

function npmProgram() {
  const script = process.env.npm_execpath
  return script && /npm-cli\.js$/.test(script) ? [process.execPath, script] : ['npm']
}

/** Runs `npm ci` when node_modules is missing, half done or older than the lock. */
export async function installDependencies() {
  if (dependenciesMatch()) return
  const started = Date.now()
  say('Installing npm packages (about a minute) …')
  const [program, ...first] = npmProgram()
  // Development packages are wanted whatever NODE_ENV says: they build the application.
  const environment = { ...process.env, NODE_ENV: undefined, npm_config_omit: undefined, NUXT_TELEMETRY_DISABLED: '1' }
  const { status, output } = await run(program, [...first, 'ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error', '--fetch-retries=2'], { env: environment, quiet: true })
  if (status === 127) throw new Refusal('npm is not installed. It comes with Node from nodejs.org; on Debian: apt-get install npm.')
  if (status !== 0 || !dependenciesMatch())
    throw new Refusal(`The npm packages could not be installed; "npm ci" ended with ${status}. Without a network connection this cannot be done. The next start tries again from the beginning. npm says:\n${lastLines(output)}`)
  say(`The npm packages are installed (${duration(Date.now() - started)}).`)
}
