/** What slows refill, read from an outcome for the bars: only the kinds of site that filled at all. */
import type { Outcome } from '#shared/schemas/outcome'
import type { PartsOfClass } from './partsBar'

/** One entry a kind of site whose τ and parts are known. */
export function partsOf(outcome: Outcome): PartsOfClass[] {
  return outcome.classes.flatMap(({ name, tau, decomposition: { collisionS, failedHitsS, depletionS } }) =>
    tau.valueS === null || collisionS === null || failedHitsS === null || depletionS.value === null
      ? []
      : [{ name, tauS: tau.valueS, collisionS, failedHitsS, depletion: { valueS: depletionS.value, lowS: depletionS.low, highS: depletionS.high } }])
}
