/** `npm run -s weigh -- FILE.csv… [--condition NAME]… [--cells | --means] [--resample N] [--seed S] [--sensitivity] [--json]`: weighs the explanations. */
import { basename, extname } from 'node:path'
import { sensitivitySteps } from '../shared/fitting/weighing/sensitivity'
import { valueText } from '../shared/fitting/weighing/sentences'
import { weighUpSteps, type WeighInput, type WeighProgress } from '../shared/fitting/weighing/weigh-up'
import type { ConditionData } from '../shared/recordings/types'
import { WeighSettingsSchema, type WeighSensitivity, type WeighUp } from '../shared/schemas/weigh-up'
import type { FitRefusal } from '../shared/fitting/point-errors'
import { badInput, EXIT, runCommand } from './support/exits'
import { seedOption, wholeOption } from './support/options'
import { readConditions, readRecordingOptions, READING_USAGE } from './support/recording-file'

const USAGE = `Usage: npm run -s weigh -- FILE.csv… [--condition NAME]… [--cells | --means] [--resample N] [--seed S] [--sensitivity] ${READING_USAGE} [--json]`
const RESAMPLES = [0, 9999] as const

interface Asked { input: WeighInput, json: boolean, sensitivity: boolean, notes: string[] }

/** `--condition` may stand several times; the others once. */
function takeConditions(argv: readonly string[]): { names: string[], rest: string[] } {
  const names: string[] = [], rest: string[] = []
  for (let i = 0; i < argv.length; i++) {
    const one = argv[i]!
    if (one.startsWith('--condition=')) names.push(one.slice('--condition='.length))
    else if (one !== '--condition') rest.push(one)
    else if (argv[i + 1] === undefined) throw badInput('condition', `A name is wanted after --condition.\n${USAGE}`)
    else names.push(argv[++i]!)
  }
  return { names, rest }
}

function chosen(all: readonly ConditionData[], names: readonly string[]): ConditionData[] {
  if (names.length === 0) return [...all]
  for (const name of names) if (!all.some(one => one.condition === name)) throw badInput('condition', `There is no condition “${name}”; there are ${all.map(one => `“${one.condition}”`).join(', ')}.`)
  return all.filter(one => names.includes(one.condition))
}

function readAsked(): Asked {
  const { names, rest } = takeConditions(process.argv.slice(2))
  const { files, json, values, flags, choices } = readRecordingOptions(USAGE, ['resample', 'seed'], ['cells', 'means', 'sensitivity'], rest)
  if (flags.cells && flags.means) throw badInput('cells', `Either --cells or --means, not both.\n${USAGE}`)
  const read = files.map(file => readConditions(file, files.length > 1 ? { ...choices, condition: basename(file, extname(file)).slice(0, 120) } : choices))
  const pool = read.flatMap(one => one.conditions), conditions = chosen(pool, names), resamples = wholeOption('resample', values.resample, RESAMPLES, 0)
  const without = conditions.filter(one => one.cells.length === 0)
  if ((flags.cells || resamples > 0) && without.length > 0) throw badInput(flags.cells ? 'cells' : 'resample', `${without.map(one => `“${one.condition}”`).join(', ')} ${without.length === 1 ? 'has' : 'have'} no cells, only means.`)
  const settings = WeighSettingsSchema.parse({ cells: flags.means !== true, resamples, ...values.seed === undefined ? {} : { seed: seedOption(values.seed) } })
  return { input: { conditions, settings, pool }, json, sensitivity: flags.sensitivity === true, notes: read.flatMap(one => one.notes) }
}

/** Runs to the end; between fits others get their turn, so that an interruption is heard. */
async function toTheEnd<T>(steps: Generator<WeighProgress, T | FitRefusal>, signal: AbortSignal): Promise<T | null> {
  let rested = performance.now()
  for (let step = steps.next(); ; step = steps.next()) {
    if (step.done) {
      const found = step.value
      if (found !== null && typeof found === 'object' && 'refused' in found) throw badInput('points', found.refused.message)
      return found as T
    }
    if (performance.now() - rested < 100) continue
    await new Promise(resolve => setImmediate(resolve))
    // While cells are resampled the rest is done: that ends by itself and keeps what it has.
    if (signal.aborted && step.value.stage !== 'resample') return null
    rested = performance.now()
  }
}

function summary(found: WeighUp, sensitivity: WeighSensitivity | null): string {
  const best = found.candidates.filter(one => one.best), width = Math.max(...best.map(one => one.name.length))
  const rows = best.map(one => `  ${one.name.padEnd(width)}  χ² ${one.chi2.toFixed(1).padStart(7)} (${one.dof})  behind ${one.behind.toFixed(1).padStart(7)}  ${one.changes.map(({ manipulation, parameter }) => `${manipulation}: ${parameter}`).join(', ')}`)
  const values = best[0]!.parameters.map(one => `  ${one.label}${one.manipulation ? ` under ${one.manipulation}` : ''}${one.protocol ? `, ${one.protocol}` : ''}: ${valueText(one)}`)
  return [
    found.verdict.sentence, ...found.verdict.changeSentences, '', ...rows, '', `Values of ${best[0]!.name}, 95 % intervals:`, ...values, '', found.noise.sentence, ...found.spread ? [found.spread.sentence] : [], ...found.notes,
    '', 'Doubts:', ...found.doubts.map(({ sentence }) => `  ${sentence}`), ...found.settle.length > 0 ? ['', 'What would settle it:', ...found.settle.map(({ sentence }) => `  ${sentence}`)] : [],
    ...found.resample ? ['', found.resample.sentence] : [], ...sensitivity ? ['', sensitivity.sentence, sensitivity.uneven.sentence, sensitivity.rescale] : [], '', `Digest ${found.digest}`,
  ].join('\n')
}

async function weigh(): Promise<number> {
  const interruption = new AbortController()
  process.once('SIGINT', () => interruption.abort())
  process.once('SIGTERM', () => interruption.abort())
  const { input, json, sensitivity, notes } = readAsked()
  for (const note of notes) process.stderr.write(`Note, ${note}\n`)
  const found = await toTheEnd(weighUpSteps({ ...input, stopResampling: () => interruption.signal.aborted }), interruption.signal)
  const other = found && sensitivity ? await toTheEnd(sensitivitySteps(input), interruption.signal) : null
  if (!found || (sensitivity && !other)) {
    process.stderr.write('Interrupted before the weigh-up was done; there is no result.\n')
    return EXIT.interrupted
  }
  process.stdout.write(`${json ? JSON.stringify(other ? { ...found, sensitivity: other } : found) : summary(found, other)}\n`)
  return found.resample?.partial ? EXIT.interrupted : EXIT.done
}

await runCommand(weigh)
