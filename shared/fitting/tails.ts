/** Tails of the chi-squared and F laws, and quantiles of the first. */
import { exp, log, log1p } from './elementary'

/** Lanczos' approximation (coefficients of Godfrey, g = 607/128), to about 1e-15. */
const LANCZOS = [0.9999999999999971, 57.15623566586292, -59.59796035547549, 14.136097974741746, -0.4919138160976202, 0.00003399464998481189, 0.00004652362892704858, -0.00009837447530487956, 0.0001580887032249125, -0.00021026444172410488, 0.00021743961811521265, -0.0001643181065367639, 0.00008441822398385275, -0.000026190838401581408, 0.0000036899182659531625]

/**
 * Logarithm of the gamma function.
 * @param x - above 0 [1]
 * @returns ln Γ(x) [1]
 */
export function logGamma(x: number): number {
  const shifted = x + 607 / 128 - 0.5
  let sum = LANCZOS[0]!
  for (let k = 1; k < LANCZOS.length; k++) sum += LANCZOS[k]! / (x - 1 + k)
  return (x - 0.5) * log(shifted) - shifted + log(sum * Math.sqrt(2 * Math.PI))
}

const TINY = 1e-300

/** Upper regularised incomplete gamma function: series below a + 1, continued fraction above (Abramowitz & Stegun 6.5.29, 6.5.31). */
function gammaAbove(a: number, x: number): number {
  if (x <= 0) return 1
  const front = exp(a * log(x) - x - logGamma(a))
  if (x < a + 1) {
    let term = 1 / a, sum = term
    for (let k = 1; k < 10_000 && term > sum * 1e-17; k++) {
      term *= x / (a + k)
      sum += term
    }
    return 1 - front * sum
  }
  let b = x + 1 - a, c = 1 / TINY, d = 1 / b, value = d
  for (let k = 1; k < 10_000; k++) {
    const numerator = -k * (k - a)
    b += 2
    d = 1 / (numerator * d + b || TINY)
    c = b + numerator / c || TINY
    value *= d * c
    if (Math.abs(d * c - 1) < 1e-16) break
  }
  return front * value
}

/**
 * Upper tail of the chi-squared law.
 * @param chi2 - statistic [1]
 * @param dof - degrees of freedom, at least 1 [1]
 * @returns P(X ≥ chi2) [1]
 */
export const chiSquaredAbove = (chi2: number, dof: number): number => gammaAbove(dof / 2, chi2 / 2)

/**
 * Value that a chi-squared variable exceeds with a given probability, by bisection.
 * @param tail - probability above, in (0, 1) [1]
 * @param dof - degrees of freedom, at least 1 [1]
 * @returns the value [1]
 */
export function chiSquaredCritical(tail: number, dof: number): number {
  let low = 0, high = dof + 10
  while (chiSquaredAbove(high, dof) > tail) high *= 2
  for (let i = 0; i < 200 && high - low > 1e-14 * high; i++) {
    const middle = (low + high) / 2
    if (chiSquaredAbove(middle, dof) > tail) low = middle
    else high = middle
  }
  return (low + high) / 2
}

/** Continued fraction of the incomplete beta function (Abramowitz & Stegun 26.5.8), by Lentz' method. */
function betaFraction(x: number, a: number, b: number): number {
  let c = 1, d = 1 / (1 - (a + b) * x / (a + 1) || TINY), value = d
  for (let m = 1; m < 10_000; m++) {
    const even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / (1 + even * d || TINY)
    c = 1 + even / c || TINY
    value *= d * c
    const odd = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / (1 + odd * d || TINY)
    c = 1 + odd / c || TINY
    value *= d * c
    if (Math.abs(d * c - 1) < 1e-16) break
  }
  return value
}

function betaBelow(x: number, a: number, b: number): number {
  if (x <= 0 || x >= 1) return x <= 0 ? 0 : 1
  const front = exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * log(x) + b * log1p(-x))
  return x < (a + 1) / (a + b + 2) ? front * betaFraction(x, a, b) / a : 1 - front * betaFraction(1 - x, b, a) / b
}

/**
 * Upper tail of the F law.
 * @param f - statistic [1]
 * @param between - degrees of freedom of the numerator [1]
 * @param within - degrees of freedom of the denominator [1]
 * @returns P(X ≥ f) [1]
 */
export const fAbove = (f: number, between: number, within: number): number => f <= 0 ? 1 : betaBelow(within / (within + between * f), within / 2, between / 2)
