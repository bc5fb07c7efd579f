/** Files of an outcome: all curves, raw replicates, the documents. */
import type { Outcome } from '#shared/schemas/outcome'
import type { Scenario } from '#shared/schemas/scenario'
import { meanHalfWidth } from '#shared/walk/intervals'
import type { ReplicateBlock } from '#shared/walk/types'
import { csvOf } from './figureTable'

/** Every curve, one row a sample, filled sites of one ribbon by kind, units in the head. */
export function curvesCsv(outcome: Outcome): string {
  const kinds = outcome.classes
  const head = ['time_s', ...kinds.flatMap(kind => [
    `${kind.name}: mean filled of ${kind.sites} (sites)`, `${kind.name}: half width of the 95 % interval of the mean (sites)`, `${kind.name}: variance between replicates (sites²)`, `${kind.name}: closed form (sites)`,
    ...(kind.meanReady ? [`${kind.name}: mean ready (sites)`] : []),
  ]), 'all sites: variance between replicates (sites²)']
  const rows = outcome.timesS.map((timeS, i) => [timeS, ...kinds.flatMap((kind, j) => [
    kind.meanFilled[i]!, meanHalfWidth(kind.varFilled[i]!, outcome.replicates), kind.varFilled[i]!, outcome.closedForm.filled[j]![i]!, ...(kind.meanReady ? [kind.meanReady[i]!] : []),
  ]), outcome.varFilledTotal[i]!])
  const about = [
    ['# moorage outcome', outcome.digest, outcome.partial ? 'partial' : 'whole'], ['# seed', outcome.seed], ['# engine', `${outcome.engine.algorithm} ${outcome.engine.version}`],
    ['# scenario', outcome.scenarioDigest], ['# replicates', outcome.replicates],
  ]
  return csvOf([...about, head, ...rows])
}

/** What each replicate left behind: attachments and exposure by kind of site. */
export function replicatesCsv(outcome: Outcome, blocks: readonly ReplicateBlock[], stepS: number): string {
  const head = ['replicate', ...outcome.classes.flatMap(kind => [`${kind.name}: attachments`, `${kind.name}: exposure of empty sites (steps)`, `${kind.name}: exposure of empty sites (s)`])]
  const rows = blocks.flatMap(block => Array.from({ length: block.to - block.from }, (_, i) => [
    block.from + i, ...outcome.classes.flatMap((_, j) => [block.events[j]![i]!, block.exposureSteps[j]![i]!, block.exposureSteps[j]![i]! * stepS]),
  ]))
  return csvOf([['# moorage replicates of outcome', outcome.digest, outcome.partial ? 'partial' : 'whole'], ['# seed', outcome.seed], head, ...rows])
}

/** First attachments of sites by the time they took. */
export function firstAttachmentCsv(outcome: Outcome): string {
  const { stepS, histogram } = outcome.firstAttachment
  return csvOf([['from_s', 'to_s', 'first attachments (sites, all replicates)'], ...histogram.map((count, i) => [i * stepS, (i + 1) * stepS, count])])
}

export const documentJson = (outcome: Outcome) => `${JSON.stringify(outcome, null, 1)}\n`
/** Inputs and result together, for a deposit. */
export function bundleJson(scenario: Scenario, outcome: Outcome, about: Record<string, unknown>): string {
  return `${JSON.stringify({ format: 'moorage-bundle', version: 1, ...about, scenario, outcome }, null, 1)}\n`
}
/** A size as people say it: `31 kB`. */
export const sizeWords = (bytes: number) => bytes < 1e6 ? `${Math.max(1, Math.round(bytes / 1000))} kB` : `${(bytes / 1e6).toFixed(1)} MB`
