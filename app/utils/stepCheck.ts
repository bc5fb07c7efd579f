/** Whether two walks of one scenario agree: the difference of their ratios against both intervals together. */
import type { Outcome } from '#shared/schemas/outcome'

type Ratio = Pick<Outcome, 'ratio'>
export interface StepCheck { difference: number, half: number, agree: boolean }

/** Null where one of the two has no interval. Half widths of independent runs add as squares. */
export function stepCheck(one: Ratio, other: Ratio): StepCheck | null {
  const half = ({ ratio }: Ratio) => ratio.low === null || ratio.high === null ? null : (ratio.high - ratio.low) / 2
  const [first, second] = [half(one), half(other)]
  if (first === null || second === null || one.ratio.value === null || other.ratio.value === null) return null
  const difference = other.ratio.value - one.ratio.value
  const both = Math.hypot(first, second)
  return { difference, half: both, agree: Math.abs(difference) <= both }
}
