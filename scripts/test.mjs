/** `npm test`: installs what is missing, builds, runs every suite. The last line is `N passed, N failed`; `--only NAME` runs one suite. */
import { existsSync } from 'node:fs'
import { install } from './install.mjs'
import { ensureBuild } from './support/build.mjs'
import { findChromium } from './support/packages.mjs'
import { ROOT, lastLines, run, tool } from './support/run.mjs'
import { Refusal, duration, reasonToExit, say } from './support/say.mjs'
import { SUITES, runSuite } from './support/suites.mjs'

function chosenSuites() {
  const at = process.argv.indexOf('--only')
  if (at < 0) return SUITES
  const chosen = SUITES.filter(suite => suite.name === process.argv[at + 1])
  if (!chosen.length) throw new Refusal(`--only wants one of ${SUITES.map(suite => suite.name).join(', ')}.`, 2)
  return chosen
}

async function prepare(suites) {
  const served = suites.some(suite => suite.name === 'integration' || suite.name === 'browser')
  await install({ chromium: served, postgres: served })
  if (served) await ensureBuild()
  // The compiler settings that the tests are read with are made by Nuxt.
  if (existsSync(`${ROOT}/.nuxt/tsconfig.json`)) return
  const { status, output } = await run(tool('nuxt'), ['prepare'], { quiet: true })
  if (status !== 0) throw new Refusal(`"nuxt prepare" ended with ${status}. It says:\n${lastLines(output, 20)}`)
}

async function main() {
  const began = Date.now()
  const suites = chosenSuites()
  await prepare(suites)
  say(`Ready to test (${duration(Date.now() - began)}).`)
  const total = { passed: 0, failed: 0 }
  const complaints = []
  for (const suite of suites) {
    const started = Date.now()
    say(`\n── ${suite.name}`)
    const counts = await runSuite(suite, { MOORAGE_CHROMIUM: findChromium() ?? '' })
    total.passed += counts.passed
    total.failed += counts.failed
    complaints.push(...counts.complaints.map(line => `${suite.name}: ${line}`))
    say(`── ${suite.name}: ${counts.passed} passed, ${counts.failed} failed in ${duration(Date.now() - started)}`)
  }
  if (complaints.length) say(`\n${complaints.join('\n')}`)
  say(`\nAll of it took ${duration(Date.now() - began)}.`)
  return total
}

process.umask(0o022)
let total
try {
  total = await main()
} catch (error) {
  reasonToExit(error)
  total = { passed: 0, failed: 1 }
}
process.stdout.write(`${total.passed} passed, ${total.failed} failed\n`)
process.exitCode = total.failed === 0 ? 0 : 1
