/** When a fit is refused, and what must be said with one. */
import type { FitDesign } from './fit-design'
import type { FitParameter } from './fit'
import { refusal, type FitNote, type FitRefusal } from './point-errors'
import { PLACE } from './recovery-model'
import { chiSquaredAbove } from './tails'

const NUMBERS = { one: 'one exponential', two: 'two exponentials' } as const
/** Fewer intervals than these carry no claim of two exponentials [count]. */
const FEWEST_INTERVALS = 6
/** Time constants nearer than this are not told apart [1]. */
const NEAREST_RATIO = 2
/** Below this probability the curve does not describe the points within their errors [1]. */
const POOR_FIT = 0.001
/** Ratios that differ by less are the same number, written twice [1]. */
const SAME = 1e-12

/**
 * Why a design cannot be fitted: too few points, or nothing that recovers.
 * @param design - curves and free parameters
 * @returns the reason, or null
 */
export function refusalOf({ curves, slots, model, conditions }: FitDesign): FitRefusal | null {
  const points = curves.reduce((sum, { timesS }) => sum + timesS.length, 0)
  for (const [i, { timesS, ratios }] of curves.entries()) {
    const where = curves.length > 1 ? ` of “${conditions[i]!.condition}”` : ''
    if (timesS.length === 0) return refusal('no-points', `There is no point${where} to fit.`)
    if (ratios.length > 1 && Math.max(...ratios) - Math.min(...ratios) < SAME) return refusal('flat', `All ${ratios.length} ratios${where} are ${ratios[0]}: the curve is flat and no time constant can be read from it.`)
  }
  const free = slots.length
  if (points < free) return refusal('too-few-points', `${NUMBERS[model][0]!.toUpperCase()}${NUMBERS[model].slice(1)} ${model === 'one' ? 'has' : 'have'} ${free} free parameters here, and there ${points === 1 ? 'is 1 point' : `are ${points} points`}.`)
  for (const [i, { timesS, slots: own }] of curves.entries()) {
    const distinct = new Set(timesS).size, alone = new Set([...own].filter(slot => slot >= 0 && slots[slot]!.curves.length === 1)).size
    if (distinct < alone) return refusal('too-few-points', `“${conditions[i]!.condition}” has ${distinct} different intervals for ${alone} free parameters of its own.`)
  }
  return null
}

interface Told { parameters: readonly FitParameter[], chi2: number, dof: number, converged: boolean, criterion: number | null }

/** Notes that keep a fit from being shown as a result, or two exponentials from being claimed. */
const DOUBTFUL = new Set(['not-converged', 'at-bound', 'few-intervals', 'slow-unsampled', 'tau-outside', 'not-separable', 'first-point-only'])

/** Whether the values may stand as a result: settled, off their bounds, within the intervals, and separable where there are two. */
export const isResolved = (warnings: readonly FitNote[]): boolean => !warnings.some(one => DOUBTFUL.has(one.code))

const secondsOf = (value: number): string => `${Number(value.toPrecision(3))} s`
const nameOf = ({ name, group }: FitParameter): string => group === null ? name : `${name} (${group})`

/** Of the fit as such: did it end, where, does it describe the points. */
function fitNotes({ weighted, conditions }: FitDesign, { parameters, chi2, dof, converged, criterion }: Told): FitNote[] {
  const notes: FitNote[] = [], bound = parameters.filter(one => one.atBound)
  if (!converged) notes.push({ code: 'not-converged', message: 'The fit did not settle; its values are not a result.' })
  if (bound.length > 0) notes.push({ code: 'at-bound', message: `${bound.map(nameOf).join(', ')} ${bound.length === 1 ? 'stands' : 'stand'} on a bound and ${bound.length === 1 ? 'is' : 'are'} no result: the points do not hold ${bound.length === 1 ? 'it' : 'them'}.` })
  if (dof === 0) notes.push({ code: 'no-freedom', message: 'There are as many free parameters as points: the curve must pass through all of them, and nothing can speak against it.' })
  const p = dof > 0 && weighted.weights !== 'none' ? chiSquaredAbove(chi2, dof) : 1
  if (p < POOR_FIT) notes.push({ code: 'poor-fit', message: `The curve misses the points by more than their errors explain (χ² ${Number(chi2.toPrecision(4))} with ${dof} degrees of freedom, p ${p < 1e-6 ? 'below 0.000001' : Number(p.toPrecision(2))}). Intervals are widened for it.` })
  if (weighted.weights === 'none' && criterion === null) notes.push({ code: 'no-criterion', message: 'There are too few points for a criterion of an unweighted fit (AICc needs more than k + 1 points, the error variance counted in k).' })
  if (weighted.cells === null && conditions.some(one => one.cells.length > 0)) notes.push({ code: 'same-cells', message: 'The points are means of the same cells and taken as independent here; weights by cells, or fits of single cells, show what that misses.' })
  return notes
}

/** Of time constants that the intervals do not reach. */
function unsampled(parameters: readonly FitParameter[], [first, last]: readonly [number, number]): FitNote[] {
  const slow = parameters.filter(one => one.name === 'tauSlowS' && one.value > last)
  const outside = parameters.filter(one => one.unit === 's' && !slow.includes(one) && (one.value < first || one.value > last))
  return [
    ...slow.map(one => ({ code: 'slow-unsampled', message: `No interval is longer than ${nameOf(one)} (${secondsOf(one.value)}; the longest is ${secondsOf(last)}), so the slow part rests on the plateau alone.` })),
    ...outside.map(one => ({ code: 'tau-outside', message: `${nameOf(one)} (${secondsOf(one.value)}) lies outside the intervals that were sampled (${secondsOf(first)} to ${secondsOf(last)}).` })),
  ]
}

/** May two exponentials be claimed at all, and what may be read from them. */
function claimNotes({ curves, slots, conditions, spanS }: FitDesign, parameters: readonly FitParameter[]): FitNote[] {
  const notes: FitNote[] = []
  const slotOf = (curve: number, place: number) => parameters[curves[curve]!.slots[place]!]!
  const seen = new Set<string>()
  for (const [i, { timesS }] of curves.entries()) {
    const [share, fast, slow] = [PLACE.fastShare, PLACE.logTauFast, PLACE.logTauSlow].map(place => slotOf(i, place)) as [FitParameter, FitParameter, FitParameter]
    const where = curves.length > 1 ? ` (${conditions[i]!.condition})` : '', distinct = new Set(timesS).size
    if (curves.length === 1 && distinct < FEWEST_INTERVALS) notes.push({ code: 'few-intervals', message: `${distinct} different intervals are too few to claim two exponentials; ${FEWEST_INTERVALS} are the least.` })
    const key = [share, fast, slow].map(one => slots[parameters.indexOf(one)]!.curves.join()).join(';') + [share.value, fast.value, slow.value].join()
    if (seen.has(key)) continue
    seen.add(key)
    const ratio = slow.value / fast.value
    if (ratio < NEAREST_RATIO) notes.push({ code: 'not-separable', message: `The two time constants${where} differ by a factor of ${Number(ratio.toPrecision(2))} only, which is not separable with ordinary effort; ${NEAREST_RATIO} is the least.` })
    else if (share.se === null || share.value - 2 * share.se <= 0 || share.value + 2 * share.se >= 1) notes.push({ code: 'not-separable', message: `The fast share${where} is within two standard errors of 0 or 1${share.se === null ? ', or has no error' : ''}: one of the two exponentials may not be there.` })
    if (share.value < 0.15 && fast.value < spanS[0] / 5) notes.push({ code: 'first-point-only', message: `The fast exponential${where} only adjusts the first point: it is over well before the shortest interval.` })
  }
  return notes
}

/**
 * Everything that must be said with a fit.
 * @param design - curves and free parameters
 * @param told - what was found
 * @returns notes, the gravest first
 */
export function notesOf(design: FitDesign, told: Told): FitNote[] {
  const notes = [...fitNotes(design, told), ...unsampled(told.parameters, design.spanS)]
  if (design.model === 'two') {
    const claims = claimNotes(design, told.parameters)
    notes.push(...claims)
    if (claims.length === 0 && design.curves.length === 1) notes.push({ code: 'one-curve', message: 'Two exponentials in one curve do not say why: two kinds of site, a store that is used up and a falling drive can look alike. A weigh-up over several conditions can tell.' })
  }
  return [...notes, ...design.notes]
}
