/** Cautions against published ranges for the scenario under the pen, by field; several on one field stand one after the other. */
import { cautionsFor } from '#shared/almanac/cautions'
import type { Scenario } from '#shared/schemas/scenario'

export interface FieldCaution { sentence: string, source?: string }

/** The key '' holds what concerns the scenario as a whole. */
export function useCautions(scenario: Readonly<Ref<Scenario>>) {
  return computed(() => {
    const byPath: Record<string, FieldCaution> = {}
    for (const { path: at, sentence, source, status } of cautionsFor(scenario.value)) {
      const path = at === 'reservoir.sizeUm' ? 'reservoir.sizeUm.0' : at
      const said = source && `${source}${status === 'unverified' ? ' (unverified)' : ''}`
      const before = byPath[path]
      byPath[path] = before
        ? { sentence: `${before.sentence}${before.source ? ` ${before.source}.` : ''} ${sentence}`, source: said }
        : { sentence, source: said }
    }
    return byPath
  })
}
