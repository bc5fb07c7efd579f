/** `npm run -s simulate -- FILE [--seed S] [--replicates N] [--workers W] [--algorithm auto|attempt|touch|step] [--json]`: a run without a browser. */
import { availableParallelism } from 'node:os'
import { cautionsFor } from '../shared/almanac/cautions'
import type { Outcome } from '../shared/schemas/outcome'
import { SCENARIO_LIMITS, type Scenario } from '../shared/schemas/scenario'
import { estimateCost } from '../shared/walk/cost'
import { buildOutcome } from '../shared/walk/outcome'
import { exactTestText, kindText, partsText, unfilledText, verdictText } from '../shared/walk/sentences'
import { crewSize, runInNode } from '../workers/node'
import type { RunOrder } from '../workers/protocol'
import { BadInput, EXIT, runCommand } from './support/exits'
import { algorithmOption, readOptions, seedOption, wholeOption } from './support/options'
import { readScenario } from './support/scenario-file'

const USAGE = 'Usage: npm run -s simulate -- FILE [--seed S] [--replicates N] [--workers W] [--algorithm auto|attempt|touch|step] [--json]'
const DEFAULT_REPLICATES = 200

function readOrder(): { order: RunOrder, workers: number, json: boolean } {
  const { file, json, values } = readOptions(USAGE, ['seed', 'replicates', 'workers', 'algorithm'], process.argv.slice(2))
  const replicates = wholeOption('replicates', values.replicates, SCENARIO_LIMITS.replicates, DEFAULT_REPLICATES)
  const workers = wholeOption('workers', values.workers, [1, 64], crewSize(availableParallelism()))
  const algorithm = algorithmOption(values.algorithm)
  const scenario = readScenario(file)
  const cost = estimateCost(scenario, replicates, algorithm)
  if (cost.refusals.length > 0) throw new BadInput(cost.refusals.map(({ path, message, suggestion }) => ({ path, message: `${message} ${suggestion}` })))
  return { order: { scenario, seed: seedOption(values.seed), replicates, algorithm }, workers, json }
}

/** Warnings go to the error stream, so that the document stays alone on the other. */
function warn(scenario: Scenario): void {
  for (const { path, sentence } of cautionsFor(scenario)) process.stderr.write(`Note, ${path}: ${sentence}\n`)
  if (scenario.schedule.initialFill === 1 && scenario.schedule.releases.length === 0) process.stderr.write('Note, schedule.initialFill: every site is filled at the start; there is nothing to refill.\n')
}

function summary(outcome: Outcome, seconds: number, workers: number): string {
  const { engine, seed, replicates, partial } = outcome
  return [
    verdictText(outcome), ...outcome.classes.map(kindText), unfilledText(outcome), partsText(outcome), exactTestText(outcome),
    `${replicates} replicates${partial ? ' (partial: the run was interrupted)' : ''}, seed “${seed}”, engine ${engine.algorithm} ${engine.version}, ${seconds.toFixed(1)} s on ${workers} ${workers === 1 ? 'worker' : 'workers'}.`,
    `Scenario digest ${outcome.scenarioDigest}`, `Outcome digest  ${outcome.digest}`,
  ].filter(line => line !== '').join('\n')
}

async function simulate(): Promise<number> {
  const interruption = new AbortController()
  process.once('SIGINT', () => interruption.abort())
  process.once('SIGTERM', () => interruption.abort())
  const { order, workers, json } = readOrder()
  warn(order.scenario)
  const result = await runInNode(order, { workers, signal: interruption.signal })
  if (result.blocks.length === 0) {
    process.stderr.write('Interrupted before the first replicate was done; there is no outcome.\n')
    return EXIT.interrupted
  }
  const { engine, seed, blocks, partial, landingError } = result
  const outcome = buildOutcome({ scenario: order.scenario, seed, engine, blocks, partial, landingError })
  process.stdout.write(`${json ? JSON.stringify(outcome) : summary(outcome, result.durationMs / 1000, result.workers)}\n`)
  return partial ? EXIT.interrupted : EXIT.done
}

await runCommand(simulate)
