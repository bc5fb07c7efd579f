/** What a start says at its end: where the application is, who may sign in to try it, and what to mind on an open address. */
import { isIPv6 } from 'node:net'
import { run } from './run.mjs'
import { say, warn } from './say.mjs'
import { isLoopback } from './web-server.mjs'

const scheme = () => process.env.NITRO_SSL_CERT && process.env.NITRO_SSL_KEY ? 'https' : 'http'
const bracketed = host => isIPv6(host) ? `[${host}]` : host

/** Address by which this machine itself reaches the server. */
function localAddress({ host, port }) {
  const reachable = host === '0.0.0.0' ? '127.0.0.1' : host === '::' ? '::1' : host
  return `${scheme()}://${bracketed(reachable)}:${port}`
}

/** Demo accounts as the seed names them; one place for names and pass phrase. @returns {Promise<string>} lines to print */
async function demoAccountLines() {
  const { status, output } = await run(process.execPath, ['--import', 'tsx', 'scripts/demo-accounts.ts'], { quiet: true })
  return status === 0 ? output : ''
}

function print(where, { accounts, dataFolder, ownDatabase }) {
  say(`\nMoorage is served at ${localAddress(where)}/`)
  say(ownDatabase ? `Its database and secrets are in ${dataFolder}.` : 'It uses the database that DATABASE_URL names.')
  if (accounts) say(`\n${accounts}`)
  if (!isLoopback(where.host)) {
    warn(`\nThis address is open to other machines, so the demo accounts cannot sign in. Register an account of your own.`)
    if (scheme() === 'http') warn('It is served without TLS: pass phrases would cross the network in the clear, and browsers refuse the sign-in cookie. Put a proxy with TLS in front of it, or give NITRO_SSL_CERT and NITRO_SSL_KEY.')
  }
  say('\nCtrl-C stops the web server and the database.')
}

export const greet = { localAddress, demoAccountLines, print }
