/** One exponential beside two, on the same points: criteria on one scale, and the bootstrap between them. */
import type { ConditionData } from '../recordings/types'
import { bootstrapOneAgainstTwo, type BootstrapOptions, type BootstrapResult } from './bootstrap'
import { excessScatter } from './criteria'
import { finishFit, searchConditions, type RecoveryFit } from './fit'
import type { FitOptions } from './fit-design'
import type { FitRefusal } from './point-errors'

export interface BothFits {
  /** One exponential, then two. Both criteria divide χ² by the s of the two, the better fit. */
  fits: [RecoveryFit, RecoveryFit]
  /** Null where it was ended early. */
  bootstrap: BootstrapResult | null
}

/**
 * Fits one and two exponentials and asks whether the second is needed.
 * @param conditions - fitted together; one for a single fit
 * @param options - weights, what is free, shared or held
 * @param bootstrap - resamples, seed, progress
 * @returns both fits and the bootstrap, or why there is none
 */
export function fitBoth(conditions: readonly ConditionData[], options: Omit<FitOptions, 'model'>, bootstrap: BootstrapOptions = {}): BothFits | FitRefusal {
  const one = searchConditions(conditions, { ...options, model: 'one' })
  if ('refused' in one) return one
  const two = searchConditions(conditions, { ...options, model: 'two' })
  if ('refused' in two) return two
  const scale = two.design.weighted.weights === 'none' ? 1 : excessScatter(two.found.chi2, two.found.residuals.length - two.design.slots.length)
  return { fits: [finishFit(one, scale), finishFit(two, scale)], bootstrap: bootstrapOneAgainstTwo(one, two, bootstrap) }
}
