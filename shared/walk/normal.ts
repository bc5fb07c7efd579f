/** Tails of the normal law and quantiles of Student's, for intervals and tests. */
import { erfc } from '../kinetics/special'

/**
 * Two-sided tail of the standard normal law, P(|Z| ≥ |z|) = erfc(|z|/√2).
 * @param z - standard normal statistic [1]
 * @returns the probability; 0 beyond |z| ≈ 38 [1]
 */
export const twoSidedTail = (z: number): number => erfc(Math.abs(z) / Math.SQRT2)

/**
 * Lower tail of the standard normal law.
 * @param z - standard normal value [1]
 * @returns P(Z ≤ z) [1]
 */
export const normalBelow = (z: number): number => z <= 0 ? twoSidedTail(z) / 2 : 1 - twoSidedTail(z) / 2

/** P(T > t) for t ≥ 0 and whole degrees of freedom: finite sums of Abramowitz & Stegun 26.7.3 and 26.7.4. */
function studentAbove(t: number, degrees: number): number {
  const angle = Math.atan(t / Math.sqrt(degrees)), cosine2 = degrees / (degrees + t * t)
  let term = degrees % 2 ? Math.cos(angle) : 1, sum = degrees === 1 ? 0 : term
  for (let k = degrees % 2 ? 3 : 2; k <= degrees - 2; k += 2) {
    term *= (k - 1) / k * cosine2
    sum += term
  }
  const within = degrees % 2 ? 2 / Math.PI * (angle + Math.sin(angle) * sum) : Math.sin(angle) * sum
  return (1 - within) / 2
}

/**
 * 97.5 % quantile of Student's t, by bisection on its exact tail; beyond 2,000 degrees of freedom the normal one (they differ by less than 0.0012).
 * @param degrees - degrees of freedom, whole, at least 1 [1]
 * @returns the quantile [1]
 */
export function studentQuantile975(degrees: number): number {
  if (degrees > 2000) return 1.959963984540054
  let low = 1.9, high = 13
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2
    if (studentAbove(middle, degrees) > 0.025) low = middle
    else high = middle
  }
  return (low + high) / 2
}
