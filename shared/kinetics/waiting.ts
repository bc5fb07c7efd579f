/** Waiting for attachments: hits until one succeeds, filling of N like sites, and the noise of their number. */

/**
 * Hits until one attaches: geometric.
 * @param attachProbability - s, above 0 [1]
 * @returns mean 1/s, variance (1 − s)/s², median [hits]
 */
export function hitsUntilAttached(attachProbability: number): { mean: number, variance: number, median: number } {
  const s = attachProbability
  return { mean: 1 / s, variance: (1 - s) / (s * s), median: Math.max(1, Math.ceil(-Math.LN2 / Math.log1p(-s) - 1e-12)) }
}

/**
 * Chance of no attachment after a number of hits, (1 − s)ⁿ by log1p.
 * @param attachProbability - s [1]
 * @param hits - n [1]
 * @returns probability [1]
 */
export function unattachedAfter(attachProbability: number, hits: number): number {
  return Math.exp(hits * Math.log1p(-attachProbability))
}

/**
 * Probability of an event within an interval from its rate, 1 − e^(−Δt·rate) by expm1.
 * @param ratePerS - rate [1/s]
 * @param intervalS - Δt [s]
 * @returns probability [1]
 */
export function probabilityWithin(ratePerS: number, intervalS: number): number {
  return -Math.expm1(-ratePerS * intervalS)
}

/**
 * The rate that gives a probability within an interval, −ln(1 − p)/Δt by log1p.
 * @param probability - p, below 1 [1]
 * @param intervalS - Δt [s]
 * @returns rate [1/s]
 */
export function rateFrom(probability: number, intervalS: number): number {
  return -Math.log1p(-probability) / intervalS
}

/**
 * First and last of N like sites to fill, in units of τ (order statistics of exponentials, Rényi 1953).
 * @param sites - N [1]
 * @returns mean of the first 1/N; mean H_N, SD √Σ1/i² and median −ln(1 − 2^(−1/N)) of the last [τ]
 */
export function firstAndLast(sites: number): { firstMean: number, lastMean: number, lastSd: number, lastMedian: number } {
  let harmonic = 0, squares = 0
  for (let i = 1; i <= sites; i++) {
    harmonic += 1 / i
    squares += 1 / (i * i)
  }
  return { firstMean: 1 / sites, lastMean: harmonic, lastSd: Math.sqrt(squares), lastMedian: -Math.log(-Math.expm1(-Math.LN2 / sites)) }
}

/**
 * Mean time to fill half of N like sites, Σ 1/(N − i) over i < N/2; tends to ln 2.
 * @param sites - N [1]
 * @returns time in units of τ [τ]
 */
export function halfFilled(sites: number): number {
  let sum = 0
  for (let i = 0; i < sites / 2; i++) sum += 1 / (sites - i)
  return sum
}

/**
 * Chance that all N like sites are filled, (1 − e^(−t/τ))^N.
 * @param sites - N [1]
 * @param time - t/τ [1]
 * @returns probability [1]
 */
export function allFilled(sites: number, time: number): number {
  return Math.exp(sites * Math.log(-Math.expm1(-time)))
}

/**
 * Mean and standard deviation of the number filled: binomial, summed over kinds of site.
 * @param kinds - number of sites of each kind and the chance that one is filled [1]
 * @returns mean and standard deviation [sites]
 */
export function filledNoise(kinds: readonly { sites: number, filled: number }[]): { mean: number, sd: number } {
  const mean = kinds.reduce((sum, kind) => sum + kind.sites * kind.filled, 0)
  return { mean, sd: Math.sqrt(kinds.reduce((sum, kind) => sum + kind.sites * kind.filled * (1 - kind.filled), 0)) }
}

/**
 * Covariance of the numbers filled at two times of one run, N·p₁·(1 − p₂): points of a run are not independent.
 * @param sites - N [1]
 * @param earlier - p₁ [1]
 * @param later - p₂, at least p₁ [1]
 * @returns covariance [sites²] and correlation [1]
 */
export function filledCovariance(sites: number, earlier: number, later: number): { covariance: number, correlation: number } {
  const covariance = sites * earlier * (1 - later)
  return { covariance, correlation: covariance / (sites * Math.sqrt(earlier * (1 - earlier) * later * (1 - later))) }
}

/**
 * Reversible attachment: resting occupancy k₊/(k₊ + k₋) and the time constant 1/(k₊ + k₋).
 * @param attachPerS - k₊ [1/s]
 * @param detachPerS - k₋ [1/s]
 * @returns occupancy [1] and τ [s]
 */
export function reversible(attachPerS: number, detachPerS: number): { occupancy: number, tauS: number } {
  return { occupancy: attachPerS / (attachPerS + detachPerS), tauS: 1 / (attachPerS + detachPerS) }
}
