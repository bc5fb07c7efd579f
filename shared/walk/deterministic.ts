/** Elementary functions from +, −, ×, / alone, so that a compiled plan has the same bits in every engine (Math.exp may differ by a last digit). */

/**
 * 1 − e^(−x): chance that something with rate × duration x has happened. Taylor series after halving, then 1 − e^(−2y) = q(2 − q) upwards; no cancellation at small x.
 * @param x - rate times duration, at least 0 [1]
 * @returns the chance, relative error below 1e-14 [1]
 * @throws RangeError on a negative or undefined argument
 */
export function chanceWithin(x: number): number {
  if (!(x >= 0)) throw new RangeError(`chanceWithin: ${x} is not at least 0`)
  if (x > 64) return 1
  let halvings = 0, y = x
  while (y > 0.125) {
    y /= 2
    halvings++
  }
  let term = y, sum = 0
  for (let k = 2; k <= 16; k++) {
    sum += term
    term = -term * y / k
  }
  for (; halvings > 0; halvings--) sum *= 2 - sum
  return sum
}

/**
 * e^(−x) by the same series (a Taylor sum of the halved argument, then squares).
 * @param x - exponent, at least 0 [1]
 * @returns e^(−x), relative error below 1e-13 for x < 64; exactly 0 beyond 745 [1]
 * @throws RangeError on a negative or undefined argument
 */
export function decayOver(x: number): number {
  if (!(x >= 0)) throw new RangeError(`decayOver: ${x} is not at least 0`)
  if (x > 745) return 0
  let halvings = 0, y = x
  while (y > 0.125) {
    y /= 2
    halvings++
  }
  let term = 1, sum = 0
  for (let k = 1; k <= 16; k++) {
    sum += term
    term = -term * y / k
  }
  for (; halvings > 0; halvings--) sum *= sum
  return sum
}
