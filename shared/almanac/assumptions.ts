/** What a prediction takes for granted, chosen by what the scenario leaves out: shown with an outcome, and in the almanac in full. */
import type { Scenario } from '../schemas/scenario'
import type { Caution } from './caution'

type Rule = Caution & { when: (scenario: Scenario) => boolean }
const always = () => true

const RULES: readonly Rule[] = [
  { id: 'A-06', path: 'medium.densityPerUm3', sentence: 'ρ counts mobile vesicles only; 15 % (cone) to 80 % (mouse bipolar, at ribbons) may be immobile.', source: 'H-31, H-32', status: 'looked up', when: ({ vesicles }) => vesicles.every(vesicle => vesicle.mobilityFactor > 0) },
  { id: 'A-07', path: 'medium', sentence: 'Cisterns, mitochondria, tethers and caged motion are not drawn; they enter through D alone.', source: 'H-34, H-79', status: 'looked up', when: always },
  { id: 'A-08', path: 'sites', sentence: 'A vesicle that attached stays.', source: 'the scenario itself', status: 'computed', when: ({ sites }) => sites.every(site => site.detachPerS === 0) },
  { id: 'A-09', path: 'sites', sentence: 'A site holds one vesicle; compound fusion and release of several at once are not modelled.', source: 'H-78', status: 'looked up', when: always },
  { id: 'A-10', path: 'schedule', sentence: 'Attachment does not depend on calcium; a first stimulus may itself speed refill.', source: 'H-57, H-71, H-72', status: 'looked up', when: ({ schedule }) => schedule.decline === null },
  { id: 'A-11', path: 'sites', sentence: 'An attached vesicle is ready at once; where priming follows capture the curve starts like an S.', source: 'H-73', status: 'looked up', when: ({ sites }) => sites.every(site => site.readyPerS === null) },
  { id: 'A-12', path: 'schedule', sentence: 'Release away from ribbons, receptor saturation and the calcium current are left out; 10 to 20 % of paired-pulse depression may be postsynaptic.', source: 'H-53, H-77', status: 'looked up', when: always },
  { id: 'A-13', path: 'medium.diffusionUm2PerS', sentence: 'Nothing is converted for temperature; Q10 values of 1.3 to 2.1 are published for other synapses.', source: 'H-75, H-76', status: 'looked up', when: always },
  { id: 'A-17', path: 'schedule', sentence: 'Points of one run are not independent: what is filled early stays filled later.', source: 'binomial covariance N·p₁(1 − p₂)', status: 'computed', when: always },
  { id: 'A-19', path: 'schedule.initialFill', sentence: 'Every filled site releases alike, and no site is fed by the rows above it.', source: 'the scenario itself', status: 'computed', when: always },
]

/**
 * Assumptions that stand behind a scenario's prediction.
 * @param scenario - with defaults filled in
 * @returns assumptions that apply [1]
 */
export function assumptionsFor(scenario: Scenario): Caution[] {
  return RULES.filter(rule => rule.when(scenario)).map(({ id, path, sentence, source, status }) => ({ id, path, sentence, source, status }))
}
