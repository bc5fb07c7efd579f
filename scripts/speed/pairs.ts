/** Paired timing: A, B, A, B … in one run; the ratio is the median of the pairs' ratios. */

export const ROUNDS = 7

/** Median of an odd number of values. */
export function median(values: number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1]!
}

/** One side of a comparison: does the work once and says how long it took [ms]. */
export type Side = (round: number) => Promise<number> | number

/** Medians of both sides [ms] and of the paired ratios reference : ours [1]. */
export interface Paired { ours: number, reference: number, ratio: number }

/**
 * Times both sides in turn, after one call of each that does not count.
 * @param ours - this product
 * @param reference - what it is held against
 * @param rounds - counted pairs, odd, at least 5 [1]
 */
export async function pairUp(ours: Side, reference: Side, rounds = ROUNDS): Promise<Paired> {
  await ours(0)
  await reference(0)
  const mine: number[] = [], theirs: number[] = []
  for (let round = 1; round <= rounds; round++) {
    mine.push(await ours(round))
    theirs.push(await reference(round))
  }
  return { ours: median(mine), reference: median(theirs), ratio: median(mine.map((ms, i) => theirs[i]! / ms)) }
}

/** Wall time of a piece of work [ms]. */
export async function timed(work: () => unknown): Promise<number> {
  const start = performance.now()
  await work()
  return performance.now() - start
}
