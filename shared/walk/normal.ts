/** Tails of the normal law and quantiles of Student's, for intervals and tests. */

/**
 * Two-sided tail of the standard normal law, P(|Z| ≥ |z|) = erfc(|z|/√2), by the series of erf near 0 and Lentz's continued fraction beyond (Abramowitz & Stegun 7.1.6, 7.1.14).
 * @param z - standard normal statistic [1]
 * @returns the probability, relative error below 1e-12; 0 beyond |z| ≈ 38 [1]
 */
export function twoSidedTail(z: number): number {
  const x = Math.abs(z) / Math.SQRT2
  if (x < 2) {
    let term = x, sum = x
    for (let n = 1; Math.abs(term) > 1e-17 * sum; n++) {
      term *= 2 * x * x / (2 * n + 1)
      sum += term
    }
    return 1 - 2 / Math.sqrt(Math.PI) * Math.exp(-x * x) * sum
  }
  // erfc(x) = e^(−x²)/√π · 1/(x + (1/2)/(x + 1/(x + (3/2)/(x + …)))), from far enough out inwards.
  let tail = 0
  for (let k = 120; k > 0; k--) tail = k / 2 / (x + tail)
  return Math.exp(-x * x) / Math.sqrt(Math.PI) / (x + tail)
}

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
