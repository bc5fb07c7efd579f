/** Profile intervals: how far a parameter may go before the best fit of all others grows too bad. */
import { fitLeastSquares, SEARCH, type LeastSquaresProblem } from './least-squares'

export interface ProfileBounds {
  /** Null: open, the data allow every value down to, or up to, the bound of the parameter. */
  low: number | null
  high: number | null
  /** A better minimum met on the way; the fit should start again from it. */
  better: Float64Array | null
}

interface Profiled { problem: LeastSquaresProblem, best: Float64Array, chi2: number, rise: number }

/** √ of how far χ² stands above its minimum: nearly straight in the parameter, so that it is easily solved. */
function profileAt({ problem, chi2 }: Profiled, j: number, value: number, from: Float64Array): { height: number, at: Float64Array, chi2: number } {
  const lower = [...problem.lower!], upper = [...problem.upper!], start = Float64Array.from(from)
  lower[j] = upper[j] = start[j] = value
  const fit = fitLeastSquares({ ...problem, lower, upper }, start, SEARCH)
  return { height: Math.sqrt(Math.max(0, fit.chi2 - chi2)), at: fit.parameters, chi2: fit.chi2 }
}

const CLOSE = 1e-5
const MOST_TRIES = 40

/** One end: outward by growing steps until the profile is high enough, then false position (Illinois) between. */
function endOf(profiled: Profiled, j: number, firstStep: number): { end: number | null, better: Float64Array | null } {
  const { problem, best, chi2, rise } = profiled, goal = Math.sqrt(rise), origin = best[j]!
  const bound = firstStep < 0 ? problem.lower![j]! : problem.upper![j]!
  if (origin === bound) return { end: null, better: null }
  const within = (value: number) => firstStep < 0 ? Math.max(bound, value) : Math.min(bound, value)
  let near = { value: origin, miss: -goal }, far: typeof near | null = null, at = best, value = within(origin + firstStep), side = 0
  for (let tries = 0; tries < MOST_TRIES; tries++) {
    const tried = profileAt(profiled, j, value, at)
    if (tried.chi2 < chi2 - 1e-6 * Math.max(1, chi2)) return { end: null, better: tried.at }
    at = tried.at
    const miss = tried.height - goal
    if (Math.abs(miss) < CLOSE * goal) return { end: value, better: null }
    if (miss < 0) {
      if (value === bound) return { end: null, better: null }
      if (far && side < 0) far.miss /= 2
      near = { value, miss }
    } else {
      if (far && side > 0) near.miss /= 2
      far = { value, miss }
    }
    side = Math.sign(miss)
    if (far) value = near.value + (far.value - near.value) * near.miss / (near.miss - far.miss)
    else value = within(origin + (value - origin) * Math.min(4, Math.max(1.2, 1.05 * goal / Math.max(tried.height, 1e-9))))
  }
  return { end: far ? value : null, better: null }
}

/**
 * Profile interval of one free parameter.
 * @param problem - with bounds
 * @param best - free parameters at the minimum, [unit of the parameter]
 * @param chi2 - minimum of χ² [1]
 * @param j - which parameter [1]
 * @param rise - how far χ² may stand above its minimum, 3.84·s for 95 % [1]
 * @param standardError - of the parameter, for the first step; NaN where there is none [unit of the parameter]
 * @returns the two ends [unit of the parameter]
 */
export function profileBounds(problem: LeastSquaresProblem, best: Float64Array, chi2: number, j: number, rise: number, standardError: number): ProfileBounds {
  const range = problem.upper![j]! - problem.lower![j]!
  const step = Number.isFinite(standardError) && standardError > 0 ? Math.min(standardError * Math.sqrt(rise), range / 4) : range / 50
  const down = endOf({ problem, best, chi2, rise }, j, -step)
  if (down.better) return { low: null, high: null, better: down.better }
  const up = endOf({ problem, best, chi2, rise }, j, step)
  return { low: down.end, high: up.end, better: up.better }
}
