/** Whole counts out of shares, by the method of largest remainder. */

/**
 * Splits a whole total by shares. Each part first takes the floor of its quota; what is left goes one by one to the largest remainders (Hamilton's method; the earlier part wins a tie).
 * @param shares - shares of the parts, each at least 0, their sum above 0 (normalised here) [1]
 * @param total - number of things to share out, integer at least 0 [1]
 * @returns whole counts in the order of the shares; their sum is the total [1]
 * @throws RangeError on a total that is no whole number, or on shares that cannot be normalised
 */
export function realisedCounts(shares: readonly number[], total: number): number[] {
  if (!Number.isInteger(total) || total < 0) throw new RangeError(`realisedCounts: ${total} is not a whole number of things`)
  const sum = shares.reduce((all, share) => all + share, 0)
  if (!(sum > 0 && sum < Infinity) || shares.some(share => !(share >= 0))) throw new RangeError('realisedCounts: shares must be at least 0 and sum to more than 0')
  // A quota such as 0.3 · 10 / 1 may fall a rounding error below its whole number: snap it before the floor.
  const quotas = shares.map((share) => {
    const quota = share * total / sum
    return Math.abs(quota - Math.round(quota)) < 1e-9 * Math.max(1, quota) ? Math.round(quota) : quota
  })
  const counts = quotas.map(quota => Math.floor(quota))
  let left = total - counts.reduce((all, count) => all + count, 0)
  const byRemainder = quotas.map((quota, part) => ({ part, remainder: quota - Math.floor(quota) }))
    .sort((one, other) => other.remainder - one.remainder || one.part - other.part)
  for (let i = 0; left > 0; i++, left--) counts[byRemainder[i % byRemainder.length]!.part]!++
  return counts
}
