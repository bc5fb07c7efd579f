/** Curves of the editor's expectation: closed form at drawn times, and the mean of a walk as a fraction of the sites. */
import { closedFormFilled } from '#shared/kinetics/closed-form'
import type { Outcome } from '#shared/schemas/outcome'
import { stepSeconds, type Scenario } from '#shared/schemas/scenario'
import type { FigureSeries } from './figureSeries'

const LOG_TIMES = 140, LINEAR_TIMES = 80
/** 95 % of a normal law lies within this many standard errors. */
const Z95 = 1.959964

/** Times worth drawing from 1/2000 of the duration (at least one step) to its end [s]: spaced for a logarithmic and for a linear axis. */
export function drawnTimes(scenario: Scenario): number[] {
  const last = scenario.schedule.durationS
  const first = Math.min(Math.max(stepSeconds(scenario.medium), last / 2000), last / 100)
  const log = Array.from({ length: LOG_TIMES }, (_, i) => first * (last / first) ** (i / (LOG_TIMES - 1)))
  const linear = Array.from({ length: LINEAR_TIMES }, (_, i) => last * i / (LINEAR_TIMES - 1))
  const around = scenario.schedule.releases.flatMap(({ atMs }) => [atMs / 1000, atMs / 1000 + first])
  return [...new Set([...log.slice(0, -1), ...linear, ...around])].sort((a, b) => a - b)
}

const sumOf = (rows: readonly (readonly number[])[], i: number) => rows.reduce((sum, row) => sum + row[i]!, 0)
const sitesOf = (outcome: Outcome) => outcome.classes.reduce((sum, one) => sum + one.sites, 0)

/** Closed form as a fraction of the sites. */
export function closedFormSeries(scenario: Scenario, sites: number, kind: 'closed-form' | 'earlier', label: string): FigureSeries {
  const times = drawnTimes(scenario)
  const { filled } = closedFormFilled(scenario, times)
  return { id: kind, kind, label, times, values: times.map((_, i) => sumOf(filled, i) / sites) }
}

/** Mean of the walk with the 95 % interval of the mean; no band for a single replicate. */
export function walkSeries(outcome: Outcome, kind: 'walk' | 'preview', label: string): FigureSeries {
  const sites = sitesOf(outcome)
  const values = outcome.timesS.map((_, i) => sumOf(outcome.classes.map(one => one.meanFilled), i) / sites)
  const half = outcome.varFilledTotal.map(variance => Z95 * Math.sqrt(variance / outcome.replicates) / sites)
  const inner = outcome.replicates > 1 ? { low: values.map((value, i) => value - half[i]!), high: values.map((value, i) => value + half[i]!) } : undefined
  return { id: kind, kind, label, note: inner ? '95 % interval of the mean' : 'one replicate, no band', times: outcome.timesS, values, inner }
}
