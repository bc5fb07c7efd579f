/** The sentences of the front page: what the walk found, and the line for a methods section. */
import type { Outcome } from '#shared/schemas/outcome'
import { stepSeconds, type Scenario } from '#shared/schemas/scenario'
import { formatInterval, formatNumber, formatTime, type NumberStyle } from '#shared/units'

/** `1.13 (1.10 to 1.15)`; a dash stands where there is no number. */
export function ratioWords(ratio: Outcome['ratio'], style: NumberStyle = {}): string {
  if (ratio.value === null) return 'not known'
  const value = formatNumber(ratio.value, { ...style, significant: 3 })
  return ratio.low === null || ratio.high === null ? `${value}, no interval` : `${value} (${formatInterval(ratio.low, ratio.high, style)})`
}

const SUPPLY_WORDS: Record<Scenario['reservoir']['supply'], string> = {
  stirred: 'from a stirred neighbourhood', held: 'from a bath held at the resting density', sealed: 'from a sealed terminal',
}

/** One sentence for a methods section with every number that a reader needs to make the run again. */
export function methodsSentence(scenario: Scenario, outcome: Outcome, style: NumberStyle = {}): string {
  const { medium, ribbon, schedule, sites } = scenario
  const perRibbon = outcome.classes.reduce((sum, one) => sum + one.sites, 0)
  const number = (value: number) => formatNumber(value, { ...style, significant: 3 })
  const kinds = sites.map(site => `${site.name} ${number(site.share)} of them at ${number(site.attachProbability)}`).join(', ')
  return `Refill was simulated with Moorage (engine ${outcome.engine.version}, ${outcome.engine.algorithm}) on a ribbon of ${perRibbon} sites, ${ribbon.count} ribbons, `
    + `with attachment probability per hit by kind of site (${kinds}), D = ${number(medium.diffusionUm2PerS)} µm²/s, ${number(medium.densityPerUm3)} vesicles per µm³ and a diameter of ${number(medium.spacingNm)} nm, `
    + `${SUPPLY_WORDS[scenario.reservoir.supply]}, ${number(1 - schedule.initialFill)} of the sites empty at the start; lattice step ${formatTime(stepSeconds(medium), style)}, `
    + `${outcome.replicates} replicates, seed “${outcome.seed}”, scenario ${outcome.scenarioDigest.slice(0, 12)}; curves are means with 95 % intervals of the mean.`
}
