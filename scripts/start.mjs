/** `npm start`: from a bare machine to a served application. PORT, HOST, DATABASE_URL and MOORAGE_DATA are honoured. */
import { once } from 'node:events'
import { install } from './install.mjs'
import { ensureBuild } from './support/build.mjs'
import { installationSecrets, lockDataFolder, openDataFolder } from './support/data-folder.mjs'
import { greet } from './support/greeting.mjs'
import { checkNodeVersion } from './support/node-version.mjs'
import { reasonToExit, say } from './support/say.mjs'
import { checkAddressFree, endLeftoverServer, isLoopback, listenAddress, placeServer, serverEnvironment, startServer, stopServer, waitForHealth } from './support/web-server.mjs'

process.umask(0o022)
/** What was begun, to be ended in reverse order. */
const endings = []
let stopping = false

async function endAll() {
  for (const end of endings.splice(0).reverse()) {
    try {
      await end()
    } catch (error) {
      reasonToExit(error)
      process.exitCode = 1
    }
  }
}

/** Ends everything in order; a second signal does not cut it short. */
function stopOnSignal() {
  const stop = async () => {
    if (stopping) return
    stopping = true
    say('Stopping the web server and the database …')
    await endAll()
    say('Stopped.')
    process.exit(process.exitCode ?? 0)
  }
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, stop)
}

async function main() {
  checkNodeVersion()
  const where = listenAddress()
  const ownCluster = !process.env.DATABASE_URL
  // npm and apt are not to be cut in half by the order below: until they are done, Ctrl-C ends this process as usual.
  await install({ postgres: ownCluster })
  const dataFolder = openDataFolder({ ownCluster })
  endings.push(lockDataFolder(dataFolder))
  stopOnSignal()
  await endLeftoverServer(dataFolder)
  await checkAddressFree(where)
  const digest = await ensureBuild()
  const placed = placeServer(dataFolder, digest)
  const secrets = installationSecrets(dataFolder)
  const { fillDatabase, openDatabase } = await import('./support/database.mjs')
  const database = await openDatabase(dataFolder, secrets)
  endings.push(database.stop)
  await fillDatabase(database, dataFolder)
  await serve({ where, dataFolder, placed, database, secrets })
}

async function serve({ where, dataFolder, placed, database, secrets }) {
  const demoAccounts = isLoopback(where.host)
  const child = startServer(placed, serverEnvironment(where, {
    NUXT_DATABASE_URL: database.applicationUrl,
    NUXT_SESSION_PASSWORD: process.env.NUXT_SESSION_PASSWORD || secrets.sessionPassword,
    NUXT_DEMO_ACCOUNTS: String(demoAccounts),
    NUXT_PUBLIC_DEMO_ACCOUNTS: String(demoAccounts),
  }), dataFolder)
  endings.push(() => stopServer(child, dataFolder))
  const ended = once(child, 'exit')
  const [accounts] = await Promise.all([demoAccounts ? greet.demoAccountLines() : '', waitForHealth(child, greet.localAddress(where))])
  greet.print(where, { accounts, dataFolder, ownDatabase: !process.env.DATABASE_URL })
  const [code, signal] = await ended
  if (stopping) return await new Promise(() => undefined)
  throw new Error(`The web server ended unexpectedly (${code ?? signal}).`)
}

try {
  await main()
} catch (error) {
  if (!stopping) {
    process.exitCode = reasonToExit(error)
    await endAll()
    process.exit(process.exitCode)
  }
}
