/** What a run would cost before it is set going, and why it cannot be. */
import { estimateCost } from '#shared/walk/cost'
import type { Scenario } from '#shared/schemas/scenario'
import { formatTime } from '#shared/units'
import type { RunSettings } from '~/utils/runSettings'

export function useRunCost(scenario: Readonly<Ref<Scenario>>, run: Readonly<Ref<RunSettings>>) {
  const cost = computed(() => estimateCost(scenario.value, run.value.replicates, run.value.algorithm))
  const refusals = computed(() => cost.value.refusals)
  const sentence = computed(() => {
    if (refusals.value.length > 0) return ''
    const saved = cost.value.savedRefusal ? ` ${cost.value.savedRefusal}` : ''
    return `About ${formatTime(Math.max(0.1, cost.value.seconds), { significant: 2 })} on this machine by the “${cost.value.algorithm}” walk.${saved}`
  })
  return { cost, refusals, sentence }
}
