/** One site with constant rates: empty, captured, ready. Exact solution of its small linear system. */

export interface SiteRates {
  /** Attachment of an empty site [1/s]. */
  attachPerS: number
  /** Loss from a filled site, ready or not [1/s]. */
  detachPerS: number
  /** Captured to ready; null = ready at once [1/s]. */
  readyPerS: number | null
}
export interface SiteState {
  /** Probability that the site holds a vesicle [1]. */
  filled: number
  /** Probability that it holds one that is ready; at most `filled` [1]. */
  ready: number
}

/** (e^(−a·h) − e^(−b·h)) / (b − a) without cancellation; h·e^(−a·h) where a = b. */
function differenceOfExponentials(a: number, b: number, h: number): number {
  const slow = Math.min(a, b), gap = Math.abs(b - a)
  return Math.exp(-slow * h) * (gap * h < 1e-300 ? h : -Math.expm1(-gap * h) / gap)
}

/**
 * Moves the state of one site forward over one interval. With a = attach + detach and b = ready + detach,
 *   F' = a·(E − F),   R' = ready·F − b·R,
 * where E = attach/a is what F settles to; F is filled, R ready. Exact (also where a = b) for constant rates.
 * When the attachment rate drifts, `rates` holds its mean over the interval and `settled` the values of E at its two ends: E is then taken as a straight line between them.
 * @param state - probabilities at the start [1]
 * @param rates - rates, each at least 0 [1/s]
 * @param elapsedS - length of the interval, above 0 [s]
 * @param settled - E at the start and at the end of the interval; left out for constant rates [1]
 * @returns probabilities at its end [1]
 */
export function evolveSite(state: SiteState, rates: SiteRates, elapsedS: number, settled?: readonly [number, number]): SiteState {
  const { attachPerS, detachPerS, readyPerS } = rates
  const a = attachPerS + detachPerS
  const level = a > 0 ? attachPerS / a : 0
  const drifts = settled !== undefined && a * elapsedS > 1e-6 // below that the line and its mean differ by less than 1e-12 in F
  const slope = drifts ? (settled[1] - settled[0]) / elapsedS : 0
  const lag = drifts ? slope / a : 0
  const start = (drifts ? settled[0] : settled ? (settled[0] + settled[1]) / 2 : level) - lag
  const away = state.filled - start
  const filled = a > 0 ? start + slope * elapsedS + away * Math.exp(-a * elapsedS) : state.filled
  if (readyPerS === null) return { filled, ready: filled }
  const b = readyPerS + detachPerS
  const once = -Math.expm1(-b * elapsedS) / b // ∫ e^(−b·u) du over the interval
  const base = a > 0 ? start : state.filled
  const ready = state.ready * Math.exp(-b * elapsedS) + readyPerS * (base * once + slope * (elapsedS - once) / b
    + (a > 0 ? away * differenceOfExponentials(a, b, elapsedS) : 0))
  return { filled, ready: Math.min(Math.max(ready, 0), filled) }
}

/**
 * Empties a fraction of the sites that can release: the ready ones.
 * @param state - probabilities just before [1]
 * @param fraction - chance that a ready site releases [1]
 * @returns probabilities just after [1]
 */
export function releaseSite(state: SiteState, fraction: number): SiteState {
  return { filled: state.filled - fraction * state.ready, ready: state.ready * (1 - fraction) }
}
