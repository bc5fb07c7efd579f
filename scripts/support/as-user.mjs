/** Runs a program as another account of this machine: PostgreSQL refuses root, and the web server has no need of it. */
import { spawnSync } from 'node:child_process'
import { existsSync, readFileSync } from 'node:fs'
import { Refusal } from './say.mjs'

export const isRoot = () => process.getuid?.() === 0

/**
 * Numbers of an account, from the system's own list.
 * @param {string} name account
 * @returns {{ uid: number, gid: number } | null} null where there is no such account
 */
export function accountOf(name) {
  const line = readFileSync('/etc/passwd', 'utf8').split('\n').find(one => one.startsWith(`${name}:`))
  if (!line) return null
  const [, , uid, gid] = line.split(':')
  return { uid: Number(uid), gid: Number(gid) }
}

/**
 * The account that owns the database: `postgres` when root, else whoever runs this.
 * @returns {{ uid: number, gid: number } | null} null: no change of account
 */
export function databaseAccount() {
  if (!isRoot()) return null
  const account = accountOf('postgres')
  if (!account) throw new Refusal('PostgreSQL does not run as root, and this machine has no account "postgres". Install Debian\'s package: apt-get install postgresql.')
  return account
}

/**
 * A dedicated account without a login for the web server; `nobody` where none can be made.
 * @returns {{ uid: number, gid: number } | null} null: no change of account
 */
export function serverAccount() {
  if (!isRoot()) return null
  const known = accountOf('moorage')
  if (known) return known
  if (existsSync('/usr/sbin/useradd'))
    spawnSync('/usr/sbin/useradd', ['--system', '--user-group', '--no-create-home', '--home-dir', '/nonexistent', '--shell', '/usr/sbin/nologin', 'moorage'], { stdio: 'ignore' })
  return accountOf('moorage') ?? accountOf('nobody')
}

/** Environment of a database program: nothing of the caller's but the path. */
const plainEnvironment = () => ({ PATH: process.env.PATH ?? '/usr/bin:/bin', LC_ALL: 'C.UTF-8' })

/**
 * Runs a database program to its end. The file system's root is its working folder, as the caller's may be closed to it.
 * @param {string} program path
 * @param {string[]} argumentList arguments
 * @returns {{ status: number | null, output: string }} exit status and what it printed
 */
export function runAsDatabaseAccount(program, argumentList) {
  const account = databaseAccount()
  const done = spawnSync(program, argumentList, {
    cwd: '/', env: plainEnvironment(), encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'], timeout: 120_000,
    ...(account ?? {}),
  })
  if (done.error) return { status: null, output: done.error.message }
  return { status: done.status, output: `${done.stdout}${done.stderr}`.trim() }
}
