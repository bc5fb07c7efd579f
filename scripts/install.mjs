/** Installs what a bare machine lacks: npm's packages and Debian's PostgreSQL; `--with-chromium` the tests' browser too. Does nothing when all is there. */
import { realpathSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { installDependencies } from './support/dependencies.mjs'
import { checkNodeVersion } from './support/node-version.mjs'
import { installPackages } from './support/packages.mjs'
import { reasonToExit } from './support/say.mjs'

/**
 * @param {{ chromium?: boolean, postgres?: boolean }} [wants] the tests need the browser; a given DATABASE_URL needs no server here
 */
export async function install({ chromium = false, postgres = true } = {}) {
  checkNodeVersion()
  await installPackages([...(postgres ? ['postgresql'] : []), ...(chromium ? ['chromium'] : [])])
  await installDependencies()
}

if (realpathSync(process.argv[1]) === fileURLToPath(import.meta.url)) {
  try {
    await install({ chromium: process.argv.includes('--with-chromium') })
  } catch (error) {
    process.exitCode = reasonToExit(error)
  }
}
