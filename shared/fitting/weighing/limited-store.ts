/**
 * Recovery from a store of able vesicles that is used up, beside an ample one: dE/dt = −E(k₁S/S₀ + k₂), dS/dt = −E·k₁S/S₀ per site.
 * With v = −ln(S/S₀) the system has a closed form E(v), and t(v) is one integral: no differential equation is stepped.
 */
import { exp, expm1 } from '../elementary'

/** Ten-point Gauss–Legendre rule on (−1, 1): the positive half (Abramowitz & Stegun, table 25.4). */
const HALF = [0.1488743389816312, 0.4333953941292472, 0.6794095682990244, 0.8650633666889845, 0.9739065285171717]
const HALF_WEIGHTS = [0.2955242247147529, 0.2692667193099964, 0.2190863625159820, 0.1494513491505806, 0.0666713443086881]
const X = Float64Array.from([...HALF.map(x => -x), ...HALF]), W = Float64Array.from([...HALF_WEIGHTS, ...HALF_WEIGHTS])

/** Longest panel in v while the store still empties, and the part of the way to E = 0 that a panel may go. */
const LONGEST = 1.5
const PART = 0.6
/** Beyond it the store is empty to the last digit and the rate is linear in v. */
const STORE_EMPTY = 40
const NOTHING_LEFT = 1e-10

class Walk {
  k1 = 0
  k2 = 0
  s0 = 0
  d = 0
  c = 0
  v = 0
  t = 0
  /** ∫ f_θ/f² du for ln k₁, ln k₂, ln s₀ and d. */
  readonly sums = new Float64Array(4)

  begin(at: Float64Array): void {
    this.k1 = exp(at[0]!)
    this.k2 = exp(at[1]!)
    this.s0 = exp(at[2]!)
    this.d = at[3]!
    this.c = this.s0 * this.k2 / this.k1
    this.v = this.t = 0
    this.sums.fill(0)
  }

  empty(v: number): number {
    return this.d + this.s0 * expm1(-v) - this.c * v
  }

  /** dv/dt. */
  speed(v: number): number {
    return this.k1 / this.s0 * this.empty(v)
  }

  private duration(to: number): number {
    const half = (to - this.v) / 2, middle = (to + this.v) / 2
    let sum = 0
    for (let j = 0; j < 10; j++) sum += W[j]! / this.speed(middle + half * X[j]!)
    return half * sum
  }

  private advance(to: number): void {
    const half = (to - this.v) / 2, middle = (to + this.v) / 2, { k1, k2, s0, d, sums } = this
    for (let j = 0; j < 10; j++) {
      const u = middle + half * X[j]!, f = this.speed(u), weight = half * W[j]! / (f * f)
      sums[0]! += weight * k1 * (d / s0 + expm1(-u))
      sums[1]! -= weight * k2 * u
      sums[2]! -= weight * k1 * d / s0
      sums[3]! += weight * k1 / s0
    }
    this.v = to
  }

  /** Walks to a time; false where nothing is left to fill before it. */
  reach(time: number, withSums: boolean): boolean {
    for (;;) {
      const left = time - this.t, empty = this.empty(this.v)
      if (!(empty > NOTHING_LEFT * this.d)) return false
      if (left <= 0) return true
      const cap = Math.min(this.v > STORE_EMPTY ? Infinity : LONGEST, PART * empty / (this.s0 * exp(-this.v) + this.c))
      let to = this.v + Math.min(left * this.speed(this.v), cap), taken = this.duration(to)
      // A remainder below the last digit of v, or of the time, is none.
      if (!(to > this.v) || !(taken > 0) || left <= 1e-14 * time) {
        this.t = time
        return true
      }
      const ends = taken > left
      // The panel passes the time: Newton from the right is monotone, since the speed only falls.
      for (let tries = 0; ends && tries < 30; tries++) {
        const change = (taken - left) * this.speed(to)
        to -= change
        if (Math.abs(change) <= 1e-13 * Math.max(1e-3, to)) break
        taken = this.duration(to)
      }
      if (withSums) this.advance(to)
      else this.v = to
      this.t = ends ? time : this.t + taken
    }
  }
}
const walk = new Walk()

/**
 * R at sorted times, and its derivatives.
 * @param at - ln k₁, ln k₂ (k in 1/s), ln s₀ (able vesicles per site), d [1]
 * @param times - sorted, rising [s]
 * @param ratio - takes R at each time [1]
 * @param by - where given, takes the four derivatives by `at`, row by row [1]
 */
export function limitedStoreCurve(at: Float64Array, times: Float64Array, ratio: Float64Array, by: Float64Array | null): void {
  walk.begin(at)
  let left = true
  for (let i = 0; i < times.length; i++) {
    left = left && walk.reach(times[i]!, by !== null)
    if (!left) {
      ratio[i] = 1
      by?.fill(0, 4 * i, 4 * i + 4)
      continue
    }
    const { v, s0, c, sums } = walk
    ratio[i] = 1 - walk.empty(v)
    if (!by) continue
    const speed = walk.speed(v), slope = (s0 * exp(-v) + c) * speed
    by[4 * i] = slope * sums[0]! - c * v
    by[4 * i + 1] = slope * sums[1]! + c * v
    by[4 * i + 2] = slope * sums[2]! - s0 * expm1(-v) + c * v
    by[4 * i + 3] = slope * sums[3]! - 1
  }
}
