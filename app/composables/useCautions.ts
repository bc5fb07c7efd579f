/** Cautions against published ranges for the scenario under the pen, by field. */
import { cautionsFor } from '#shared/almanac/cautions'
import type { Scenario } from '#shared/schemas/scenario'

/** The key '' holds what concerns the scenario as a whole. */
export function useCautions(scenario: Readonly<Ref<Scenario>>) {
  return computed(() => Object.fromEntries(cautionsFor(scenario.value).map(one => [one.path, {
    sentence: one.sentence, source: one.source ? `${one.source}${one.status === 'unverified' ? ' (unverified)' : ''}` : undefined,
  }])))
}
