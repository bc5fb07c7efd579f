/** Curves of an outcome as fractions of its sites: the walk with its two bands, the closed form, and one curve a class. */
import type { Outcome } from '#shared/schemas/outcome'
import { meanHalfWidth } from '#shared/walk/intervals'
import type { FigureBand, FigureSeries } from './figureSeries'

/** 95 % of a normal law lies within this many standard deviations. */
const Z95 = 1.959964
export const outcomeSites = (outcome: Pick<Outcome, 'classes'>) => outcome.classes.reduce((sum, one) => sum + one.sites, 0)
const clamp = (value: number) => Math.min(1, Math.max(0, value))
const total = (rows: readonly (readonly number[])[], i: number) => rows.reduce((sum, row) => sum + row[i]!, 0)

function bandOf(values: readonly number[], variances: readonly number[], half: (variance: number) => number | null, sites: number): FigureBand | undefined {
  const halves = variances.map(half)
  if (halves.some(one => one === null)) return undefined
  return { low: values.map((value, i) => clamp(value - halves[i]! / sites)), high: values.map((value, i) => clamp(value + halves[i]! / sites)) }
}

export interface OutcomeSeriesStyle { id?: string, kind?: FigureSeries['kind'], label?: string, shortLabel?: string, spread?: boolean }
/** The mean of the walk; a single replicate has no band, and says so. */
export function outcomeWalk(outcome: Outcome, style: OutcomeSeriesStyle = {}): FigureSeries {
  const sites = outcomeSites(outcome)
  const { replicates } = outcome
  const values = outcome.timesS.map((_, i) => total(outcome.classes.map(one => one.meanFilled), i) / sites)
  const inner = bandOf(values, outcome.varFilledTotal, variance => meanHalfWidth(variance, replicates), sites)
  const outer = style.spread !== false && replicates > 1 ? bandOf(values, outcome.varFilledTotal, variance => Z95 * Math.sqrt(variance), sites) : undefined
  return {
    id: style.id ?? 'walk', kind: style.kind ?? 'walk',
    label: style.label ?? `${replicates === 1 ? 'Walk, 1 replicate' : `Walk, mean of ${replicates} replicates`}${outcome.partial ? ' (partial)' : ''}`, shortLabel: style.shortLabel ?? (inner ? 'Walk, 95 % band' : 'Walk'),
    note: inner ? (outer ? 'inner band: 95 % interval of the mean' : '95 % interval of the mean') : 'one replicate has no band',
    times: outcome.timesS, values, inner, ...(outer ? { outer, outerLabel: '95 % of single ribbons' } : {}),
  }
}

export function outcomeClosedForm(outcome: Outcome, label = 'Closed form'): FigureSeries {
  const sites = outcomeSites(outcome)
  return { id: 'closed', kind: 'closed-form', label, shortLabel: 'Closed form', times: outcome.timesS, values: outcome.timesS.map((_, i) => total(outcome.closedForm.filled, i) / sites) }
}

/** One curve a kind of site, as a fraction of that kind. */
export function outcomeKinds(outcome: Outcome): FigureSeries[] {
  return outcome.classes.filter(kind => kind.sites > 0).map((kind, i) => {
    const values = kind.meanFilled.map(mean => mean / kind.sites)
    return {
      id: `kind-${i}`, kind: i === 0 ? 'walk' as const : 'other' as const, label: `Walk, ${kind.name} sites`, shortLabel: kind.name, times: outcome.timesS, values,
      inner: bandOf(values, kind.varFilled, variance => meanHalfWidth(variance, outcome.replicates), kind.sites),
    }
  })
}
