/** `npm run -s fit -- FILE.csv --model one|two|both [--weights sem|pooled|none|cells] [--free-plateau] [--condition NAME] [--json]`: fits a recording. */
import { BOOTSTRAP_RESAMPLES, BOOTSTRAP_SEED } from '../shared/fitting/bootstrap'
import { fitCells, type CellsFit } from '../shared/fitting/cell-fits'
import { fitCondition, type RecoveryFit } from '../shared/fitting/fit'
import { fitBoth, type BothFits } from '../shared/fitting/fit-both'
import { fitText, secondNeededText } from '../shared/fitting/fit-sentences'
import { WEIGHTS, type FitRefusal, type Weights } from '../shared/fitting/point-errors'
import type { ConditionData } from '../shared/recordings/types'
import { badInput, EXIT, runCommand } from './support/exits'
import { seedOption, wholeOption } from './support/options'
import { readConditions, readRecordingOptions, READING_USAGE } from './support/recording-file'

const USAGE = `Usage: npm run -s fit -- FILE.csv --model one|two|both [--weights sem|pooled|none|cells] [--free-plateau] [--condition NAME] [--seed S] [--resamples N] ${READING_USAGE} [--json]`
const MODELS = ['one', 'two', 'both'] as const
const RESAMPLES = [99, 99_999] as const

interface Asked { condition: ConditionData, model: typeof MODELS[number], weights: Weights, freePlateau: boolean, seed: string, resamples: number, json: boolean, notes: string[] }

function conditionNamed(conditions: readonly ConditionData[], name: string | undefined): ConditionData {
  const names = conditions.map(one => `“${one.condition}”`).join(', ')
  if (name === undefined) {
    if (conditions.length === 1) return conditions[0]!
    throw badInput('condition', `This file has ${conditions.length} conditions: ${names}. Name one with --condition.`)
  }
  const found = conditions.find(one => one.condition === name) ?? conditions.find(one => one.condition.toLowerCase() === name.trim().toLowerCase())
  if (!found) throw badInput('condition', `There is no condition “${name}” in this file; it has ${names}.`)
  return found
}

function readAsked(): Asked {
  const { files, json, values, flags, choices } = readRecordingOptions(USAGE, ['model', 'weights', 'condition', 'seed', 'resamples'], ['free-plateau'], process.argv.slice(2))
  if (files.length > 1) throw badInput(files[1]!, `One file at a time.\n${USAGE}`)
  const model = MODELS.find(one => one === values.model), weights = WEIGHTS.find(one => one === (values.weights ?? 'sem'))
  if (!model) throw badInput('model', values.model === undefined ? `One of ${MODELS.join(', ')} is wanted.\n${USAGE}` : `One of ${MODELS.join(', ')} is wanted; “${values.model}” was read.`)
  if (!weights) throw badInput('weights', `One of ${WEIGHTS.join(', ')} is wanted; “${values.weights}” was read.`)
  const resamples = wholeOption('resamples', values.resamples, RESAMPLES, BOOTSTRAP_RESAMPLES), seed = values.seed === undefined ? BOOTSTRAP_SEED : seedOption(values.seed)
  const { conditions, notes } = readConditions(files[0]!, choices)
  return { condition: conditionNamed(conditions, values.condition), model, weights, freePlateau: flags['free-plateau'] === true, seed, resamples, json, notes }
}

/** What cannot be fitted is bad input: the points are named with their condition. */
function unlessRefused<T extends object>(condition: ConditionData, found: T | FitRefusal): T {
  if ('refused' in found) throw badInput('points', `Condition “${condition.condition}”: ${found.refused.message}`)
  return found
}

type Document = { condition: string, cells?: Partial<Record<'one' | 'two', CellsFit>> } & (RecoveryFit | (BothFits & { bootstrapP: number | null }))

function fitAsked({ condition, model, weights, freePlateau, seed, resamples }: Asked): Document {
  const options = { weights, freePlateau }, name = condition.condition
  const cellsOf = (kind: 'one' | 'two') => condition.cells.length > 0 ? { [kind]: unlessRefused(condition, fitCells(condition, { model: kind, freePlateau })) } : {}
  const cells = { ...(model === 'two' ? {} : cellsOf('one')), ...(model === 'one' ? {} : cellsOf('two')) }
  const withCells = Object.keys(cells).length > 0 ? { cells } : {}
  if (model !== 'both') return { condition: name, ...unlessRefused(condition, fitCondition(condition, { ...options, model })), ...withCells }
  const both = unlessRefused(condition, fitBoth([condition], options, { seed, resamples }))
  return { condition: name, ...both, bootstrapP: both.bootstrap?.p ?? null, ...withCells }
}

const fitsOf = (document: Document): RecoveryFit[] => 'fits' in document ? document.fits : [document]

function summary(document: Document): string {
  const needed = 'fits' in document ? [secondNeededText(document)] : []
  return [`${document.condition}`, ...fitsOf(document).flatMap(fitText), ...needed].join('\n')
}

async function fit(): Promise<number> {
  const asked = readAsked(), document = fitAsked(asked)
  for (const note of asked.notes) process.stderr.write(`Note, ${note}\n`)
  const warnings = fitsOf(document).flatMap(one => one.warnings.map(({ message }) => `Warning, ${one.model === 'one' ? 'one exponential' : 'two exponentials'}: ${message}\n`))
  if (!asked.json) process.stderr.write(warnings.join(''))
  process.stdout.write(`${asked.json ? JSON.stringify(document) : summary(document)}\n`)
  return EXIT.done
}

await runCommand(fit)
