/** Runs one suite of tests and counts what it reports; what did not run counts as failed. */
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { run, tool } from './run.mjs'

/** In this order: cheap ones first. Minutes are limits, several times what each takes on two cores. */
export const SUITES = [
  { name: 'unit', minutes: 10 },
  { name: 'reference', minutes: 12 },
  { name: 'house', minutes: 4 },
  { name: 'integration', minutes: 15 },
  { name: 'browser', minutes: 25 },
]

/**
 * Counts of one report in vitest's JSON form. A skipped or unfinished test is a failure: nothing is left out in silence.
 * @param {{ testResults: { name: string, status: string, message?: string, assertionResults: { status: string, fullName: string }[] }[] }} report
 * @returns {{ passed: number, failed: number, complaints: string[] }} counts, and a line for each failure
 */
export function countReport(report) {
  let passed = 0
  const complaints = []
  for (const file of report.testResults) {
    for (const test of file.assertionResults) {
      if (test.status === 'passed') passed += 1
      else complaints.push(`${test.status === 'failed' ? 'failed' : 'did not run'}: ${test.fullName} (${file.name})`)
    }
    // A file that could not be loaded, or that failed outside its tests, has no failed test to show for it.
    if (file.status === 'failed' && !file.assertionResults.some(test => test.status === 'failed'))
      complaints.push(`failed as a file: ${file.name} ${(file.message ?? '').split('\n')[0]}`)
  }
  return { passed, failed: complaints.length, complaints }
}

function readReport(path) {
  try {
    return JSON.parse(readFileSync(path, 'utf8'))
  } catch {
    return null
  }
}

/** Settings of whoever runs this must not reach the tests: they make their own database and keys. */
function testEnvironment(extra) {
  const kept = Object.entries(process.env).filter(([name]) => !/^(NUXT_|NITRO_|DATABASE_URL$|MOORAGE_DATA$|MOORAGE_OWNER_URL$|MOORAGE_APP_ROLE$|NODE_ENV$|PORT$|HOST$)/.test(name))
  const plain = process.stdout.isTTY ? {} : { NO_COLOR: '1', FORCE_COLOR: undefined }
  return { ...Object.fromEntries(kept), NUXT_TELEMETRY_DISABLED: '1', ...plain, ...extra }
}

/**
 * Runs one suite.
 * @param {{ name: string, minutes: number }} suite which
 * @param {Record<string, string>} env what the tests are to know besides
 * @returns {Promise<{ passed: number, failed: number, complaints: string[] }>} counts, and a line for each failure
 */
export async function runSuite({ name, minutes }, env) {
  const folder = mkdtempSync(join(tmpdir(), 'moorage-suite-'))
  const path = join(folder, 'report.json')
  try {
    const { status } = await run(process.execPath, [tool('vitest'), 'run', '--project', name, '--reporter=dot', '--reporter=json', `--outputFile.json=${path}`],
      { env: testEnvironment(env), timeoutMs: minutes * 60_000 })
    const report = readReport(path)
    if (!report) return { passed: 0, failed: 1, complaints: [`the suite "${name}" ended with ${status} and left no report`] }
    const counts = countReport(report)
    if (counts.passed + counts.failed === 0) return { passed: 0, failed: 1, complaints: [`the suite "${name}" holds no test`] }
    // Errors outside any test and a broken set-up show only in the exit status.
    if (status !== 0 && counts.failed === 0) return { ...counts, failed: 1, complaints: [`the suite "${name}" ended with ${status} though no test failed`] }
    return counts
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}
