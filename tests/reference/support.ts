/** Comparisons for outside checks: relative tolerance for formulas, standard errors for random estimates. */
import { expect } from 'vitest'

/** Each value within a relative tolerance of the printed one. */
export function expectRelative(values: readonly number[], printed: readonly number[], tolerance: number): void {
  expect(values.length).toBe(printed.length)
  values.forEach((value, i) => expect(Math.abs(value / printed[i]! - 1), `${value} against ${printed[i]}`).toBeLessThan(tolerance))
}

/** An estimate within 4 standard errors of the exact value; a false alarm is about 1 in 16 000, and the seed is fixed. */
export function expectWithin4Se(estimate: number, exact: number, standardError: number): void {
  expect(Math.abs(estimate - exact), `${estimate} against ${exact}, SE ${standardError}`).toBeLessThanOrEqual(4 * standardError)
}
