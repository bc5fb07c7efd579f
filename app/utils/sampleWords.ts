/** How the front page says what its walk found. */
import type { Outcome } from '#shared/schemas/outcome'
import { formatInterval, formatNumber, type NumberStyle } from '#shared/units'

/** `1.13 (1.10 to 1.15)`; a dash stands where there is no number. */
export function ratioWords(ratio: Outcome['ratio'], style: NumberStyle = {}): string {
  if (ratio.value === null) return 'not known'
  const value = formatNumber(ratio.value, { ...style, significant: 3 })
  return ratio.low === null || ratio.high === null ? `${value}, no interval` : `${value} (${formatInterval(ratio.low, ratio.high, style)})`
}
