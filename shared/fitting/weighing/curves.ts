/** Mean recovery curves of the explanations, with derivatives; the last place of each vector is the depletion d, R = 1 − d·G. */
import { exp, expm1 } from '../elementary'
import { limitedStoreCurve } from './limited-store'

/**
 * Writes R at each time, and row by row its derivatives by every place of `at`, the depletion last.
 * Rates, times and stores stand as natural logarithms; shares, the variance of ln k and d as they are.
 */
export type Curve = (at: Float64Array, times: Float64Array, ratio: Float64Array, by: Float64Array | null) => void

/** One exponential: [ln k, d]. */
const oneKind: Curve = (at, times, ratio, by) => {
  const k = exp(at[0]!), d = at[1]!
  for (let i = 0; i < times.length; i++) {
    const q = k * times[i]!, empty = exp(-q)
    ratio[i] = 1 - d * empty
    if (!by) continue
    by[2 * i] = d * q * empty
    by[2 * i + 1] = -empty
  }
}

/** Two exponentials: [share w of the first, ln k₁, ln k₂, d]. */
const siteKinds: Curve = (at, times, ratio, by) => {
  const w = at[0]!, k1 = exp(at[1]!), k2 = exp(at[2]!), d = at[3]!
  for (let i = 0; i < times.length; i++) {
    const t = times[i]!, first = exp(-k1 * t), second = exp(-k2 * t), empty = w * first + (1 - w) * second
    ratio[i] = 1 - d * empty
    if (!by) continue
    by[4 * i] = -d * (first - second)
    by[4 * i + 1] = d * w * k1 * t * first
    by[4 * i + 2] = d * (1 - w) * k2 * t * second
    by[4 * i + 3] = -empty
  }
}

/** Two kinds of site of which the first stimulus may empty unequal parts: as `siteKinds`, with ln of the odds by which the share seen differs before d. */
const siteKindsUneven: Curve = (at, times, ratio, by) => {
  const w = at[0]!, k1 = exp(at[1]!), k2 = exp(at[2]!), q = exp(at[3]!), d = at[4]!
  const below = w * q + 1 - w, seen = w * q / below, bySeen = q / (below * below), byOdds = w * (1 - w) * q / (below * below)
  for (let i = 0; i < times.length; i++) {
    const t = times[i]!, first = exp(-k1 * t), second = exp(-k2 * t), empty = seen * first + (1 - seen) * second
    ratio[i] = 1 - d * empty
    if (!by) continue
    by[5 * i] = -d * (first - second) * bySeen
    by[5 * i + 1] = d * seen * k1 * t * first
    by[5 * i + 2] = d * (1 - seen) * k2 * t * second
    by[5 * i + 3] = -d * (first - second) * byOdds
    by[5 * i + 4] = -empty
  }
}

/** A rate that falls back to a resting part r: [ln k, r, ln τc, d], H = rt + (1 − r)τc(1 − e^(−t/τc)). */
const decliningDrive: Curve = (at, times, ratio, by) => {
  const k = exp(at[0]!), r = at[1]!, tau = exp(at[2]!), d = at[3]!
  for (let i = 0; i < times.length; i++) {
    const t = times[i]!, x = t / tau, q = -expm1(-x), drive = r * t + (1 - r) * tau * q, empty = exp(-k * drive)
    ratio[i] = 1 - d * empty
    if (!by) continue
    const slope = d * k * empty
    by[4 * i] = slope * drive
    by[4 * i + 1] = slope * (t - tau * q)
    by[4 * i + 2] = slope * (1 - r) * tau * (q - x * exp(-x))
    by[4 * i + 3] = -empty
  }
}

/** φ(x) = (1 − e^(−x))/x and its derivative; a series near 0, where the difference would lose digits. */
function phi(x: number): [value: number, slope: number] {
  if (x < 1e-3) return [1 - x / 2 + x * x / 6 - x * x * x / 24, -1 / 2 + x / 3 - x * x / 8 + x * x * x / 30]
  const value = -expm1(-x) / x
  return [value, (exp(-x) - value) / x]
}

/** Two steps one after the other, symmetrical in their rates: [ln k₁, ln k₂, d]. */
const twoStep: Curve = (at, times, ratio, by) => {
  const firstSlower = at[0]! <= at[1]!, a = exp(firstSlower ? at[0]! : at[1]!), b = exp(firstSlower ? at[1]! : at[0]!), d = at[2]!
  for (let i = 0; i < times.length; i++) {
    const t = times[i]!, slow = exp(-a * t), [value, slope] = phi((b - a) * t), empty = slow * (1 + a * t * value)
    ratio[i] = 1 - d * empty
    if (!by) continue
    const byB = a * t * t * slow * slope, byA = -t * empty + slow * t * value - byB
    by[3 * i + (firstSlower ? 0 : 1)] = -d * a * byA
    by[3 * i + (firstSlower ? 1 : 0)] = -d * b * byB
    by[3 * i + 2] = -empty
  }
}

const NODE_STEP = 0.25
const NODES = Float64Array.from({ length: 49 }, (_, j) => -6 + NODE_STEP * j)
const NODE_WEIGHTS = NODES.map(x => NODE_STEP * exp(-x * x / 2) / Math.sqrt(2 * Math.PI))
const FACTORS = new Float64Array(NODES.length)
/** Below this SD of ln k the derivative by its variance is taken from its limit. */
const NARROW = 0.02

/** Log-normal spread of one rate: [ln median k, variance v of ln k, d]. The trapezoid rule on 49 nodes errs by less than 1e-5 for SD ≤ 4. */
const spread: Curve = (at, times, ratio, by) => {
  const k = exp(at[0]!), sd = Math.sqrt(Math.max(0, at[1]!)), d = at[2]!
  for (let j = 0; j < NODES.length; j++) FACTORS[j] = k * exp(sd * NODES[j]!)
  for (let i = 0; i < times.length; i++) {
    const t = times[i]!
    let empty = 0, byRate = 0, byVariance = 0
    for (let j = 0; j < NODES.length; j++) {
      const x = NODES[j]!, q = FACTORS[j]! * t, part = NODE_WEIGHTS[j]! * exp(-q)
      empty += part
      byRate -= q * part
      byVariance += sd < NARROW ? x * x * (q * q - q) * part / 2 : -x * q * part / (2 * sd)
    }
    ratio[i] = 1 - d * empty
    if (!by) continue
    by[3 * i] = -d * byRate
    by[3 * i + 1] = -d * byVariance
    by[3 * i + 2] = -empty
  }
}

/**
 * Variance of the empty part between cells whose rate is spread log-normally: E[e^(−2kt)] − E[e^(−kt)]².
 * @param median - median rate [1/s]
 * @param variance - of ln k [1]
 * @param timeS - interval [s]
 * @returns the variance [1]
 */
export function spreadVariance(median: number, variance: number, timeS: number): number {
  let mean = 0, square = 0
  for (let j = 0; j < NODES.length; j++) {
    const empty = exp(-median * exp(Math.sqrt(variance) * NODES[j]!) * timeS)
    mean += NODE_WEIGHTS[j]! * empty
    square += NODE_WEIGHTS[j]! * empty * empty
  }
  return Math.max(0, square - mean * mean)
}

export const CURVES = {
  'one-kind': oneKind, 'site-kinds': siteKinds, 'site-kinds-uneven': siteKindsUneven, 'limited-store': limitedStoreCurve,
  'declining-drive': decliningDrive, 'two-step': twoStep, 'spread': spread,
} as const satisfies Record<string, Curve>
