/** `npm run -s calibrate -- [--sets N] [--seed S] [--means]`: how often a weigh-up is right and wrong on cells of known truth, as a markdown table. Takes about 20 minutes for 200 sets. */
import { parseArgs } from 'node:util'
import { fitBoth } from '../shared/fitting/fit-both'
import { describeParameters } from '../shared/fitting/weighing/intervals'
import { BENCH_NOISE, simulateCondition, type CellNoiseModel } from '../shared/fitting/weighing/simulate-cells'
import { weighQuickly, type Weighing } from '../shared/fitting/weighing/weigh-up'
import { WeighSettingsSchema } from '../shared/schemas/weigh-up'
import { seedWords, stateOf, Stream } from '../shared/walk/streams'
import { conditionsOf, DESIGNS, drawSet, TIMES_S, TRUTHS, truthValues, type Design, type Truth } from './support/calibration'
import { badInput, EXIT, runCommand } from './support/exits'
import { wholeOption } from './support/options'

const USAGE = 'Usage: npm run -s calibrate -- [--sets N] [--null-sets N] [--seed S] [--means]'
const NULL_RESAMPLES = 199

interface Cell { sets: number, right: number, wrong: number, rejected: number }
interface Coverage { inside: number, all: number }
interface Asked { sets: number, nullSets: number, seed: string, cells: boolean }

function readAsked(): Asked {
  try {
    const { values } = parseArgs({ args: process.argv.slice(2), strict: true, options: { 'sets': { type: 'string' }, 'null-sets': { type: 'string' }, 'seed': { type: 'string' }, 'means': { type: 'boolean' } } })
    const sets = wholeOption('sets', values.sets, [1, 100_000], 200)
    return { sets, nullSets: wholeOption('null-sets', values['null-sets'], [0, 1_000_000], 10 * sets), seed: values.seed ?? 'calibrate', cells: values.means !== true }
  } catch (thrown) {
    throw thrown instanceof TypeError ? badInput('', `${thrown.message}\n${USAGE}`) : thrown
  }
}

/** Whether the intervals of the true explanation hold the true values of the control. */
function cover(weighing: Weighing, truth: Truth, setting: number, coverage: Map<string, Coverage>): void {
  const found = weighing.found.get(truth.explanation)?.[0]
  if (!found) return
  const { parameters } = describeParameters(found, weighing.data, { typed: weighing.typed, scale: weighing.judgement.scale, cellDof: weighing.cells?.variance.dof ?? null, assumed: null }), values = truthValues(truth, setting)
  for (const one of parameters) {
    const value = values.get(one.name)
    if (one.manipulation !== null || value === undefined || (one.protocol !== null && one.protocol !== 'long')) continue
    const held = coverage.get(one.name) ?? { inside: 0, all: 0 }
    held.all++
    if ((one.low ?? -Infinity) <= value && (one.high ?? Infinity) >= value) held.inside++
    coverage.set(one.name, held)
  }
}

function weighSet(truth: Truth, setting: number, set: number, { seed, cells }: Asked, tally: Record<Design, Cell>, coverage: Map<string, Coverage>): void {
  const drawn = drawSet(truth, setting, set, seed)
  for (const design of DESIGNS) {
    const weighing = weighQuickly({ conditions: conditionsOf(design, drawn), settings: WeighSettingsSchema.parse({ cells }) })
    if ('refused' in weighing) throw new Error(weighing.refused.message)
    const { explanation, ranked } = weighing.judgement, cell = tally[design]
    cell.sets++
    if (explanation === truth.explanation) cell.right++
    else if (explanation !== null) cell.wrong++
    if (!ranked.find(one => one.explanation === truth.explanation)!.acceptable) cell.rejected++
    if (truth.explanation === 'site-kinds' && (design === 'control' || design === 'four')) cover(weighing, truth, setting, coverage)
  }
}

const emptyTally = () => Object.fromEntries(DESIGNS.map(design => [design, { sets: 0, right: 0, wrong: 0, rejected: 0 }])) as Record<Design, Cell>
const percent = (part: number, all: number) => all === 0 ? '–' : `${(100 * part / all).toFixed(1)}`
const error = (part: number, all: number) => (100 * Math.sqrt(Math.max(part, 1) * Math.max(1, all - part) / all ** 3)).toFixed(1)

const INDEPENDENT: CellNoiseModel = { ...BENCH_NOISE, rateSd: 0, depletionSd: 0 }

/** How often one exponential is refused at 5 % where it is true: with errors independent along the curve, as the test takes them, and with cells that keep their own rate. */
function sizeOfTest({ nullSets, seed }: Asked): string {
  if (nullSets === 0) return 'The one-against-two test was not tried.'
  const refused = [INDEPENDENT, BENCH_NOISE].map((noise, kind) => {
    const [low, high] = seedWords(`${seed}/null/${kind}`)
    let count = 0
    for (let set = 0; set < nullSets; set++) {
      const stream = new Stream(stateOf(low, high, set)), rate = [0.08, 0.25, 1.2][set % 3]!
      const condition = simulateCondition({ condition: 'control', protocol: 'long', manipulation: 'none', explanation: 'one-kind', parameters: [rate], depletion: 0.88, cells: 9 }, TIMES_S, stream, noise)
      const both = fitBoth([condition], { weights: 'pooled' }, { seed: `${seed}/${set}`, resamples: NULL_RESAMPLES })
      if ('refused' in both) throw new Error(both.refused.message)
      if (both.bootstrap && both.bootstrap.p <= 0.05) count++
    }
    return count
  })
  const said = refused.map(count => `${percent(count, nullSets)} % (± ${error(count, nullSets)})`)
  return `One against two exponentials at 5 %, ${nullSets} null sets each, B = ${NULL_RESAMPLES}: independent errors ${said[0]} refused, cells with their own rates ${said[1]}.`
}

async function calibrate(): Promise<number> {
  const asked = readAsked(), began = performance.now(), coverage = new Map<string, Coverage>(), all = emptyTally(), lines: string[] = []
  let worst = { text: 'none', share: 0 }
  for (const truth of TRUTHS) {
    const sum = emptyTally()
    for (let setting = 0; setting < truth.settings.length; setting++) {
      const tally = emptyTally()
      for (let set = 0; set < asked.sets; set++) weighSet(truth, setting, set, asked, tally, coverage)
      for (const design of DESIGNS) {
        const cell = tally[design], share = cell.wrong / cell.sets
        if (share > worst.share) worst = { share, text: `${truth.explanation} (${truth.settings[setting]!.join(', ')}), ${design}: ${percent(cell.wrong, cell.sets)} %` }
        for (const total of [sum[design], all[design]]) for (const key of ['sets', 'right', 'wrong', 'rejected'] as const) total[key] += cell[key]
      }
      process.stderr.write(`${truth.explanation} ${setting + 1}/${truth.settings.length}, ${((performance.now() - began) / 1000).toFixed(0)} s\n`)
    }
    lines.push(`| ${truth.explanation} | ${DESIGNS.map(design => `${percent(sum[design].right, sum[design].sets)} / ${percent(sum[design].wrong, sum[design].sets)}`).join(' | ')} | ${truth.settings.map(one => `(${one.join(', ')})`).join(' ')}; A: place ${truth.changes.A[0]} × ${truth.changes.A[1].toPrecision(2)}, B: place ${truth.changes.B[0]} × ${truth.changes.B[1].toPrecision(2)} |`)
  }
  lines.push(`| all | ${DESIGNS.map(design => `${percent(all[design].right, all[design].sets)} / ${percent(all[design].wrong, all[design].sets)}`).join(' | ')} | |`)
  const rejected = Math.max(...DESIGNS.map(design => all[design].rejected / all[design].sets))
  process.stdout.write([
    `Truth preferred % / another preferred %, ${asked.cells ? 'cells with their covariance' : 'means'}, ${asked.sets} sets × 3 settings, seed “${asked.seed}”, ${new Date().toISOString().slice(0, 10)}.`, '',
    `| truth | ${DESIGNS.join(' | ')} | settings |`, `|---|${DESIGNS.map(() => '---|').join('')}---|`, ...lines, '',
    `Worst cell: ${worst.text}. Truth not acceptable (p < 0.001): at most ${(100 * rejected).toFixed(1)} % per design.`,
    `Coverage of 95 % intervals, two kinds of site, control and four: ${[...coverage].map(([name, { inside, all: count }]) => `${name} ${percent(inside, count)} % (± ${error(inside, count)})`).join(', ')}.`,
    sizeOfTest(asked), `${((performance.now() - began) / 60_000).toFixed(1)} minutes.`, '',
  ].join('\n'))
  return EXIT.done
}

await runCommand(calibrate)
