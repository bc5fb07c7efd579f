/** `npm run -s expect -- FILE [--json]`: what to expect of a scenario without a full run. */
import { closedForm, closedFormFilled } from '../shared/kinetics/closed-form'
import { exactIsolatedFilled, notExactBecause } from '../shared/kinetics/isolated'
import type { Scenario } from '../shared/schemas/scenario'
import { formatNumber, formatTime } from '../shared/units'
import { estimateCost, PREVIEW, previewRefusal } from '../shared/walk/cost'
import { buildOutcome } from '../shared/walk/outcome'
import { compilePlan } from '../shared/walk/plan'
import { frameOf } from '../shared/walk/frame'
import { runInNode } from '../workers/node'
import { BadInput, EXIT, runCommand } from './support/exits'
import type { Expectation, Preview } from './support/expectation'
import { readOptions } from './support/options'
import { readScenario } from './support/scenario-file'

const USAGE = 'Usage: npm run -s expect -- FILE [--json]'
/** A preview that would take longer is not walked [s]. */
const PATIENCE_S = 120

const sumOfRows = (rows: readonly number[][]): number[] => (rows[0] ?? []).map((_, i) => rows.reduce((sum, row) => sum + row[i]!, 0))

/** Exact where one isolated site stands for itself; null where only a walk tells. */
function exactPreview(scenario: Scenario): Preview | null {
  if (notExactBecause(scenario) !== null || previewRefusal(scenario, Infinity) !== null) return null
  const exact = exactIsolatedFilled(scenario, compilePlan(scenario))
  return exact && { tauS: exact.tauS, filled: exact.filled, method: 'exact-linear', replicates: null }
}

async function walkedPreview(scenario: Scenario, signal: AbortSignal): Promise<Preview | null> {
  const result = await runInNode({ scenario, seed: PREVIEW.seed, replicates: PREVIEW.replicates, algorithm: 'auto' }, { workers: 1, signal })
  if (result.partial) return null
  const { seed, engine, blocks, landingError } = result
  const outcome = buildOutcome({ scenario, seed, engine, blocks, partial: false, landingError })
  return { tauS: outcome.tau.valueS, filled: sumOfRows(outcome.classes.map(kind => kind.meanFilled)), method: 'walk-preview', replicates: outcome.replicates }
}

function formulaPart(scenario: Scenario, timesS: number[]): Expectation['closedForm'] {
  const form = closedForm(scenario)
  return { tauS: form.tauS, filled: sumOfRows(closedFormFilled(scenario, timesS).filled), components: form.classes.map(({ name, sites, tauS }) => ({ name, sites, tauS })) }
}

function summary({ timesS, closedForm: form, preview, reason }: Expectation): string {
  const end = timesS.length - 1
  const tau = (value: number | null) => value === null ? 'no single τ' : `τ ${formatTime(value)}`
  return [
    `Closed form: ${tau(form.tauS)}; ${formatNumber(form.filled[end]!)} sites of a ribbon are filled at ${formatTime(timesS[end]!)}.`,
    ...form.components.map(one => `  ${one.name}, ${one.sites} sites: ${tau(one.tauS)}.`),
    preview
      ? `Preview (${preview.method}${preview.replicates === null ? '' : `, ${preview.replicates} replicates, seed “${PREVIEW.seed}”`}): ${tau(preview.tauS)}; ${formatNumber(preview.filled[end]!)} sites filled at ${formatTime(timesS[end]!)}.`
      : `No preview: ${reason}`,
  ].join('\n')
}

async function expect(): Promise<number> {
  const interruption = new AbortController()
  process.once('SIGINT', () => interruption.abort())
  const { file, json } = readOptions(USAGE, [], process.argv.slice(2))
  const scenario = readScenario(file)
  const { refusals } = estimateCost(scenario, PREVIEW.replicates)
  if (refusals.length > 0) throw new BadInput(refusals.map(({ path, message, suggestion }) => ({ path, message: `${message} ${suggestion}` })))
  const frame = frameOf(scenario)
  const timesS = Array.from(frame.sampleSteps, step => step * frame.stepS)
  const refusal = previewRefusal(scenario, PATIENCE_S)
  const preview = exactPreview(scenario) ?? (refusal === null ? await walkedPreview(scenario, interruption.signal) : null)
  if (interruption.signal.aborted) return EXIT.interrupted
  const expectation: Expectation = { timesS, closedForm: formulaPart(scenario, timesS), preview, ...(preview === null ? { reason: refusal ?? 'The walk gave no result.' } : {}) }
  process.stdout.write(`${json ? JSON.stringify(expectation) : summary(expectation)}\n`)
  return EXIT.done
}

await runCommand(expect)
