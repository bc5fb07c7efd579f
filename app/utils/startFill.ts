/** The note under depletion: how many sites start filled, on average. */
import type { Scenario } from '#shared/schemas/scenario'

/** “About 6 of 48 sites start filled (0.12 each).” Each site is filled by chance, so the number is a mean. */
export function sitesFilledAtStart(scenario: Scenario): string {
  const { ribbon, schedule } = scenario
  const sites = ribbon.shape === 'plate' ? ribbon.rows * ribbon.columns * ribbon.faces : 1
  if (schedule.initialFill >= 1) return 'Every site starts filled: there is nothing to refill.'
  if (schedule.initialFill === 0) return 'Every site starts empty.'
  return `On average ${Number((sites * schedule.initialFill).toPrecision(3))} of ${sites} sites start filled, each by its own chance.`
}
