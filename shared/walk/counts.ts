/** Tables for drawing whole numbers (Poisson, binomial, gaps between rare events) with one 32-bit draw, from + − × / alone. */
import type { Stream } from './streams'

const WORD = 4294967296
/** Weights below this share of the mode's cannot move a 32-bit threshold. */
const NEGLIGIBLE = 1e-16

/** Outcome `first + k` for the first k with draw < thresholds[k] (the last k has no threshold). `guide[draw >>> 24]` is a k to start from. */
export interface CountTable { first: number, thresholds: Uint32Array, guide: Uint32Array }

function tableOf(first: number, weights: number[]): CountTable {
  let total = 0
  for (const weight of weights) total += weight
  const thresholds = new Uint32Array(weights.length)
  let sum = 0
  weights.forEach((weight, k) => {
    sum += weight
    thresholds[k] = Math.min(WORD - 1, Math.floor(sum / total * WORD))
  })
  const guide = new Uint32Array(256)
  for (let high = 0, k = 0; high < 256; high++) {
    while (k < weights.length - 1 && thresholds[k]! <= high * 16777216) k++
    guide[high] = k
  }
  return { first, thresholds, guide }
}

/** Weights on both sides of a mode by the ratio of neighbours: ratio(k) = weight(k + 1) / weight(k). */
function aroundMode(mode: number, highest: number, ratio: (k: number) => number): CountTable {
  const below: number[] = [], above: number[] = [1]
  for (let k = mode, weight = 1; k < highest; k++) {
    weight *= ratio(k)
    if (!(weight > NEGLIGIBLE)) break
    above.push(weight)
  }
  let first = mode
  for (let weight = 1; first > 0; first--) {
    weight /= ratio(first - 1)
    if (!(weight > NEGLIGIBLE)) break
    below.push(weight)
  }
  return tableOf(first, [...below.reverse(), ...above])
}

/**
 * Poisson counts.
 * @param mean - expected number, at least 0 [count]
 * @returns the table
 */
export function poissonTable(mean: number): CountTable {
  return aroundMode(Math.floor(mean), Infinity, k => mean / (k + 1))
}

/**
 * Binomial counts.
 * @param trials - number of trials, whole, at least 0 [count]
 * @param chance - chance of each; below 0 and above 1 count as 0 and 1 [1]
 * @returns the table
 */
export function binomialTable(trials: number, chance: number): CountTable {
  if (chance >= 1) return tableOf(trials, [1])
  if (chance <= 0) return tableOf(0, [1])
  const odds = chance / (1 - chance)
  return aroundMode(Math.min(trials, Math.floor((trials + 1) * chance)), trials, k => (trials - k) * odds / (k + 1))
}

/** Largest gap that one draw can give; a draw of this value means `no event within GAP_CAP trials`. */
export const GAP_CAP = 512

/**
 * Trials skipped before the next event in a row of independent trials; the value GAP_CAP stands for none among that many (the law has no memory, so one draws on).
 * @param chance - chance of an event per trial, 0…1 [1]
 * @returns the table
 */
export function gapTable(chance: number): CountTable {
  const weights: number[] = []
  let left = 1
  for (let k = 0; k < GAP_CAP; k++) {
    weights.push(left * chance)
    left *= 1 - chance
  }
  return tableOf(0, [...weights, left])
}

/**
 * One draw from a table.
 * @param table - counts
 * @param stream - the replicate's stream (one draw is taken)
 * @returns the number drawn [count]
 */
export function drawCount(table: CountTable, stream: Stream): number {
  const r = stream.next(), last = table.thresholds.length - 1
  let k = table.guide[r >>> 24]!
  while (k < last && r >= table.thresholds[k]!) k++
  return table.first + k
}
