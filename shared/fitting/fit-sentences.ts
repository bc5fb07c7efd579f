/** A fit in plain words, as text: for the command line and for files; pages set the same facts in type. */
import { formatInterval, formatNumber } from '../units'
import type { FitParameter, RecoveryFit } from './fit'
import type { BothFits } from './fit-both'

const NO_BREAK = '\u00A0'
const NAMES = { depletion: 'depletion', fastShare: 'fast share', tauS: 'τ', tauFastS: 'fast τ', tauSlowS: 'slow τ', plateau: 'plateau' } as const
const BY_WEIGHTS = { sem: 'weighted by the SEM of each point', pooled: 'weighted by √n over one pooled SD', none: 'without weights', cells: 'weighted by the covariance of their cells' } as const

function intervalText(low: number | null, high: number | null, unit: string): string {
  if (low !== null && high !== null) return `95${NO_BREAK}% interval ${formatInterval(low, high)}${unit}`
  if (low !== null) return `above ${formatNumber(low)}${unit}, open at the top`
  return high === null ? 'no interval' : `below ${formatNumber(high)}${unit}, open at the bottom`
}

/** A parameter with its interval and unit; one on its bound is not shown as a result. */
export function fitParameterText({ name, unit, value, low, high, atBound, group }: FitParameter): string {
  const milliseconds = unit === 's' && Math.max(value, high ?? 0) < 1, scale = milliseconds ? 1000 : 1
  const shown = unit === '1' ? '' : `${NO_BREAK}${milliseconds ? 'ms' : 's'}`, times = (x: number | null) => x === null ? null : x * scale
  const what = `${NAMES[name]}${group === null ? '' : ` (${group})`}`, interval = intervalText(times(low), times(high), shown)
  return atBound ? `${what}: on its bound, ${formatNumber(value * scale)}${shown}; ${interval}` : `${what} ${formatNumber(value * scale)}${shown} (${interval})`
}

/** One line for the fit, one per parameter. */
export function fitText({ model, points, weights, chi2, dof, criterion, parameters, pooledSd, resolved }: RecoveryFit): string[] {
  const sum = weights === 'none' ? `residual sum of squares ${formatNumber(chi2, { significant: 4 })}` : `χ² ${formatNumber(chi2, { significant: 4 })}`
  const sd = pooledSd === null ? '' : ` (${formatNumber(pooledSd)})`
  const measure = criterion === null ? '' : `, ${weights === 'none' ? 'AICc' : 'criterion'} ${formatNumber(criterion, { significant: 4 })}`
  return [
    `${model === 'one' ? 'One exponential' : 'Two exponentials'}, ${points} points ${BY_WEIGHTS[weights]}${sd}: ${sum} with ${dof} ${dof === 1 ? 'degree' : 'degrees'} of freedom${measure}.`,
    ...parameters.map(one => `  ${fitParameterText(one)}`),
    ...(resolved ? [] : [`  ${model === 'one' ? 'These values are no result' : 'Two exponentials are not claimed from these points'}; the warnings say why.`]),
  ]
}

/** Whether the second exponential is needed, in a sentence; nothing where the bootstrap was ended early. */
export function secondNeededText({ bootstrap }: Pick<BothFits, 'bootstrap'>): string {
  if (!bootstrap) return ''
  const { p, resamples, seed } = bootstrap, least = 1 / (resamples + 1)
  const chance = p <= least ? `none of ${resamples} sets` : `${Math.round(p / least) - 1} of ${resamples} sets`
  return `If one exponential were true, ${chance} drawn from it would gain as much from a second one (p ${formatNumber(p)}, seed “${seed}”).`
}
