/**
 * `npm run -s speed -- [--json] [--install] [--only ID]`: the product's speed as ratios measured in one run, within ten minutes.
 * `ours` and `reference` are milliseconds for the same work; `ratio` is reference : ours, so larger is better.
 */
import { loadavg } from 'node:os'
import { installPackages } from './support/packages.mjs'
import { reasonToExit, warn } from './support/say.mjs'
import { hasCompiler, pythonWithNumpy, Workshop } from './speed/references'
import { ROWS, type Row, type Tools } from './speed/rows'

/** Load of the machine before this command adds to it [processes]. */
const loadAtStart = loadavg()[0]!
const IDLE = 0.5

interface Line { id: string, name: string, goal: number, unit?: 'ms', ours?: number, reference?: number, ratio?: number, note?: string, skipped?: string }

/** Why a row cannot be measured here, or null. */
function obstacle(row: Row, python: string | null, compiler: boolean): string | null {
  if (row.needs.includes('gcc') && !compiler) return 'gcc is not installed (--install fetches it by apt)'
  if (row.needs.includes('numpy') && !python) return 'numpy is not installed (--install fetches it by apt)'
  if (row.needs.includes('idle') && loadAtStart > IDLE) return `busy: load ${loadAtStart.toFixed(2)} at start, at most ${IDLE} wanted`
  return null
}

async function lineOf(row: Row, tools: Tools, compiler: boolean): Promise<Line> {
  const { id, name, goal } = row
  const skipped = obstacle(row, tools.python, compiler)
  if (skipped) return { id, name, goal, skipped }
  const { ours, reference, ratio, note } = await row.measure(tools)
  return { id, name, unit: 'ms', ours: Number(ours.toPrecision(4)), reference: Number(reference.toPrecision(4)), ratio: Number(ratio.toPrecision(3)), goal, note }
}

/** Columns by hand: a plain table that survives a mail. */
function printLine(line: Line): void {
  const figures = line.skipped
    ? `skipped: ${line.skipped}`
    : `${line.ours!.toFixed(1).padStart(10)} ${line.reference!.toFixed(1).padStart(11)} ${String(line.ratio).padStart(7)} ${String(line.goal).padStart(6)}  ${line.ratio! >= line.goal ? 'met' : 'NOT MET'}  ${line.note}`
  console.log(`${line.id.padEnd(12)} ${figures}`)
}

async function main(): Promise<void> {
  const words = process.argv.slice(2)
  const json = words.includes('--json')
  const only = words.includes('--only') ? words[words.indexOf('--only') + 1] : undefined
  const rows = only ? ROWS.filter(row => row.id === only) : ROWS
  if (rows.length === 0) {
    console.error(`--only: one of ${ROWS.map(row => row.id).join(', ')} is wanted.`)
    process.exitCode = 2
    return
  }
  let compiler = hasCompiler(), python = pythonWithNumpy()
  if (words.includes('--install')) {
    await installPackages([...(compiler ? [] : ['gcc' as const]), ...(python ? [] : ['python3-numpy' as const])], warn)
    compiler = hasCompiler()
    python = pythonWithNumpy()
  }
  const workshop = new Workshop()
  try {
    if (!json) console.log(`${'row'.padEnd(12)} ${'ours [ms]'.padStart(10)} ${'other [ms]'.padStart(11)} ${'ratio'.padStart(7)} ${'goal'.padStart(6)}`)
    const lines: Line[] = []
    for (const row of rows) {
      lines.push(await lineOf(row, { workshop, python }, compiler))
      if (!json) printLine(lines.at(-1)!)
    }
    if (json) console.log(JSON.stringify(lines, null, 2))
  } finally {
    workshop.close()
  }
}

main().catch((error: unknown) => {
  process.exitCode = reasonToExit(error)
})
