/** The built server as a process: where it may be read, as whom it runs, with which settings, and how it ends. */
import { chmodSync, copyFileSync, cpSync, existsSync, mkdirSync, readFileSync, readdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { spawn, spawnSync } from 'node:child_process'
import http from 'node:http'
import https from 'node:https'
import { createServer } from 'node:net'
import { join } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { serverAccount } from './as-user.mjs'
import { ROOT } from './run.mjs'
import { Refusal } from './say.mjs'

/** @param {string} host address */
export const isLoopback = host => host === 'localhost' || host === '::1' || /^127\.\d+\.\d+\.\d+$/.test(host)

/** PORT and HOST of the environment. @returns {{ host: string, port: number }} where to listen */
export function listenAddress() {
  const host = process.env.HOST || '127.0.0.1'
  const text = process.env.PORT || '3000'
  const port = Number(text)
  if (!/^\d+$/.test(text) || port < 1 || port > 65_535) throw new Refusal(`PORT is "${text}"; a whole number from 1 to 65535 is wanted.`, 2)
  return { host, port }
}

const WHY_NOT = {
  EADDRINUSE: ({ port }) => `Port ${port} is in use by another program. Stop that program, or choose another port: PORT=${port + 1} npm start.`,
  EADDRNOTAVAIL: ({ host }) => `HOST is "${host}", which is not an address of this machine.`,
  ENOTFOUND: ({ host }) => `HOST is "${host}", which names no address.`,
  EACCES: ({ port }) => `Port ${port} may not be opened by this account. Choose one above 1023: PORT=3000 npm start.`,
}

/** Refuses plainly when the address cannot be listened on. @param {{ host: string, port: number }} where address */
export function checkAddressFree(where) {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', error => reject(new Refusal(WHY_NOT[error.code]?.(where) ?? `${where.host}:${where.port} cannot be listened on: ${error.message}.`)))
    probe.listen(where.port, where.host, () => probe.close(() => resolve(undefined)))
  })
}

/** Whoever installed with a strict umask still wants the server's account to read the copy. */
function openForReading(path) {
  const isFolder = statSync(path).isDirectory()
  chmodSync(path, isFolder ? 0o755 : 0o644)
  if (isFolder) for (const name of readdirSync(path)) openForReading(join(path, name))
}

/** A Node under root's home cannot be run by another account; then a copy of it can. */
function nodeFor(account, folder) {
  const { status } = spawnSync(process.execPath, ['--version'], { cwd: '/', uid: account.uid, gid: account.gid, stdio: 'ignore' })
  if (status === 0) return process.execPath
  const copy = join(folder, `node-${process.version}`)
  if (!existsSync(copy)) {
    copyFileSync(process.execPath, `${copy}.new`)
    chmodSync(`${copy}.new`, 0o755)
    renameSync(`${copy}.new`, copy)
  }
  return copy
}

/**
 * Where the server is run from: the build itself, or as root a copy in the data folder, since the checkout may be closed to others.
 * @param {string} dataFolder where the copy goes
 * @param {string} digest of the build's inputs; names the copy
 * @returns {{ folder: string, node: string, account: { uid: number, gid: number } | null }} what to run, with what, as whom
 */
export function placeServer(dataFolder, digest) {
  const account = serverAccount()
  const built = join(ROOT, '.output')
  if (!account) return { folder: built, node: process.execPath, account }
  const shelf = join(dataFolder, 'served')
  const folder = join(shelf, digest.slice(0, 16))
  mkdirSync(shelf, { recursive: true, mode: 0o755 })
  if (!existsSync(folder)) {
    for (const name of readdirSync(shelf)) if (!name.startsWith('node-')) rmSync(join(shelf, name), { recursive: true, force: true })
    cpSync(built, `${folder}.new`, { recursive: true, verbatimSymlinks: true })
    openForReading(`${folder}.new`)
    renameSync(`${folder}.new`, folder)
  }
  return { folder, node: nodeFor(account, shelf), account }
}

/** Only what the server is meant to know: settings that begin with NUXT_ pass, everything else of the caller's stays outside. */
export function serverEnvironment({ host, port }, settings) {
  const passed = Object.entries(process.env).filter(([name]) => name.startsWith('NUXT_') || name === 'TZ' || name === 'NITRO_SSL_CERT' || name === 'NITRO_SSL_KEY')
  return {
    ...Object.fromEntries(passed), PATH: '/usr/local/bin:/usr/bin:/bin', LANG: 'C.UTF-8', NODE_ENV: 'production',
    HOST: host, PORT: String(port), NITRO_HOST: host, NITRO_PORT: String(port), NITRO_SHUTDOWN_TIMEOUT: '5000', NUXT_TELEMETRY_DISABLED: '1',
    ...settings,
  }
}

const pidFile = dataFolder => join(dataFolder, 'server.pid')

/**
 * Starts the server in a process group of its own, so that Ctrl-C reaches only the command, which ends things in order.
 * @param {{ folder: string, node: string, account: { uid: number, gid: number } | null }} placed from placeServer
 * @param {Record<string, string>} env its whole environment
 * @param {string} dataFolder remembers the process for a later start
 */
export function startServer({ folder, node, account }, env, dataFolder) {
  const child = spawn(node, [join(folder, 'server/index.mjs')], { cwd: folder, env, detached: true, stdio: ['ignore', 'pipe', 'pipe'], ...(account ?? {}) })
  if (child.pid) writeFileSync(pidFile(dataFolder), String(child.pid), { mode: 0o600 })
  // Nitro's own greeting names an address before the database has answered; ours comes after.
  child.stdout.on('data', (piece) => {
    const text = String(piece).split('\n').filter(line => line && !/^Listening on /.test(line)).join('\n')
    if (text) process.stdout.write(`${text}\n`)
  })
  child.stderr.pipe(process.stderr)
  return child
}

/** A server left behind by a start that was killed would hold the port. @param {string} dataFolder where its number was kept */
export async function endLeftoverServer(dataFolder) {
  const file = pidFile(dataFolder)
  if (!existsSync(file)) return
  const pid = Number(readFileSync(file, 'utf8'))
  const alive = () => {
    try {
      return /server\/index\.mjs/.test(readFileSync(`/proc/${pid}/cmdline`, 'utf8'))
    } catch {
      return false
    }
  }
  if (pid > 1 && alive()) {
    process.kill(pid, 'SIGTERM')
    for (let i = 0; i < 60 && alive(); i += 1) await pause(100)
    if (alive()) process.kill(pid, 'SIGKILL')
  }
  rmSync(file, { force: true })
}

/** A certificate that this machine does not know is no reason to call the own server ill. */
function answersOk(address) {
  return new Promise((resolve) => {
    const client = address.startsWith('https:') ? https : http
    const request = client.get(address, { timeout: 2000, rejectUnauthorized: false }, (answer) => {
      answer.resume()
      resolve(answer.statusCode === 200)
    })
    request.once('timeout', () => request.destroy())
    request.once('error', () => resolve(false))
  })
}

/**
 * Waits until the server says that it and its database are ready.
 * @param {import('node:child_process').ChildProcess} child the server
 * @param {string} address its address as this machine reaches it
 */
export async function waitForHealth(child, address) {
  for (let i = 0; i < 600; i += 1) {
    if (child.exitCode !== null || child.signalCode !== null) throw new Refusal(`The web server ended while starting (${child.exitCode ?? child.signalCode}); its last words stand above.`)
    if (await answersOk(`${address}/api/health`)) return
    await pause(i < 40 ? 50 : 200)
  }
  throw new Refusal('The web server did not become ready within two minutes.')
}

/**
 * Ends the server in good order, and by force after ten seconds.
 * @param {import('node:child_process').ChildProcess} child the server
 * @param {string} dataFolder where its number was kept
 */
export async function stopServer(child, dataFolder) {
  if (child.exitCode === null && child.signalCode === null) {
    const ended = new Promise(resolve => child.once('exit', resolve))
    child.kill('SIGTERM')
    const limit = setTimeout(() => child.kill('SIGKILL'), 10_000)
    await ended
    clearTimeout(limit)
  }
  rmSync(pidFile(dataFolder), { force: true })
}
