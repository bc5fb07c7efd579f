/** What a run would cost before it is set going, and why it cannot be. */
import { estimateCost } from '#shared/walk/cost'
import type { Scenario } from '#shared/schemas/scenario'
import { formatTime } from '#shared/units'
import { leftWords } from '~/utils/outcomeWords'
import type { RunSettings } from '~/utils/runSettings'

export function useRunCost(scenario: Readonly<Ref<Scenario>>, run: Readonly<Ref<RunSettings>>) {
  const crew = useCrew()
  const cost = computed(() => estimateCost(scenario.value, run.value.replicates, run.value.algorithm, crew.pace))
  const refusals = computed(() => cost.value.refusals.map(one => ({ path: one.path, message: `${one.message} ${one.suggestion}`.trim() })))
  const sentence = computed(() => {
    if (refusals.value.length > 0) return ''
    const { seconds, algorithm, unsavable } = cost.value
    const long = seconds < 0.1 ? 'Less than 0.1 s' : `About ${seconds < 120 ? formatTime(seconds, { significant: 2 }) : leftWords(seconds)}`
    return `${long} on this machine by the “${algorithm}” walk.${unsavable ? ` ${unsavable}` : ''}`
  })
  return { cost, refusals, sentence }
}
