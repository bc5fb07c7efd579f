/** The drive that falls back after a stimulus: g(t) = r + (1 − r)·e^(−t/τc), t from the last release. */

export interface Decline {
  /** What the factor falls to, 0…1 [1]. */
  restFactor: number
  /** Time constant of the fall [s]. */
  timeConstantS: number
}

/**
 * Factor on every attachment probability.
 * @param decline - rest factor [1] and time constant [s]; null = no decline
 * @param sinceReleaseS - time since the last release [s]
 * @returns g [1]
 */
export function declineFactor(decline: Decline | null, sinceReleaseS: number): number {
  if (!decline) return 1
  return decline.restFactor + (1 - decline.restFactor) * Math.exp(-sinceReleaseS / decline.timeConstantS)
}

/**
 * Integral of the factor, ∫₀ᵗ g = r·t + (1 − r)·τc·(1 − e^(−t/τc)).
 * @param decline - rest factor [1] and time constant [s]; null = no decline
 * @param sinceReleaseS - upper end of the integral [s]
 * @returns the integral [s]
 */
export function declineIntegral(decline: Decline | null, sinceReleaseS: number): number {
  if (!decline) return sinceReleaseS
  const { restFactor, timeConstantS } = decline
  return restFactor * sinceReleaseS - (1 - restFactor) * timeConstantS * Math.expm1(-sinceReleaseS / timeConstantS)
}
