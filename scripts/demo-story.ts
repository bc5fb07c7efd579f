/** What happened on the demo bench before you came: who saved which revision when, and which runs. All invented; the runs are walked when it is written. */
import { DEMO_SCENARIOS, type DemoScenario } from '../shared/almanac/demo-scenarios'
import type { Scenario } from '../shared/schemas/scenario'
import type { DemoPerson } from './demo'

type Author = DemoPerson['key']
export interface StoryScenario {
  key: DemoScenario['key']
  tags: readonly string[]
  revisions: { by: Author, daysAgo: number, message: string, document: Scenario }[]
}
export interface StoryRun { scenario: DemoScenario['key'], by: Author, revision: number, seed: string, replicates: number, daysAgo: number }

const final = (key: DemoScenario['key']) => DEMO_SCENARIOS.find(one => one.key === key)!
const REPLICATES = 200

/** The document before the last edits: depletion, then the reluctant sites. */
function withFill(document: Scenario, initialFill: number): Scenario {
  return { ...document, schedule: { ...document.schedule, initialFill } }
}
function oneKind(document: Scenario): Scenario {
  return { ...document, sites: [{ ...document.sites[0]!, name: 'quick', share: 1 }] }
}
function withQuick(document: Scenario, attachProbability: number): Scenario {
  return { ...document, sites: document.sites.map((site, i) => i === 0 ? { ...site, attachProbability } : site) }
}
function withShares(document: Scenario, quick: number): Scenario {
  return { ...document, sites: document.sites.map((site, i) => ({ ...site, share: i === 0 ? quick : Number((1 - quick).toFixed(6)) })) }
}

/** One line of a history, oldest first. */
function history(key: DemoScenario['key'], ...revisions: [by: Author, daysAgo: number, message: string, change?: (document: Scenario) => Scenario][]): StoryScenario {
  const { tags, scenario } = final(key)
  return { key, tags, revisions: revisions.map(([by, daysAgo, message, change]) => ({ by, daysAgo, message, document: change ? change(scenario) : scenario })) }
}

export const DEMO_STORY: { scenarios: StoryScenario[], runs: StoryRun[] } = {
  scenarios: [
    history('stirred', ['ngozi', 12.3, 'What the closed form itself assumes.']),
    history('short', ['tomasz', 9.1, 'A 25 ms step, to tell a limited store from two kinds of site.', document => withFill(document, 0.6)], ['tomasz', 8.2, 'Depletion 0.35, as measured with the short step.']),
    history('exclusive', ['ngozi', 6.4, 'Does crowding matter at 10 % occupancy?']),
    history('tp-4', ['ngozi', 7.2, 'First guess: half of the quick sites lost.', document => withShares(document, 0.3)], ['orla', 4.3, 'Share of quick sites 0.20, from the joint fit.']),
    history('ak-7', ['tomasz', 5.5, 'Attachment halved at the quick sites.', document => withQuick(document, 0.15)], ['tomasz', 2.4, 'Attachment a quarter of control at the quick sites.']),
    history('control',
      ['ngozi', 13.2, 'One kind of site, to begin with.', document => withFill(oneKind(document), 0.15)],
      ['ngozi', 4.1, 'Reluctant sites added, share 0.40.', document => withFill(document, 0.15)],
      ['tomasz', 1.02, 'Depletion 0.85 to 0.88, from the paired steps.']),
  ],
  runs: [
    { scenario: 'control', by: 'ngozi', revision: 1, seed: 'kp-1', replicates: REPLICATES, daysAgo: 13.1 },
    { scenario: 'stirred', by: 'ngozi', revision: 1, seed: 'kp-2', replicates: REPLICATES, daysAgo: 12.2 },
    { scenario: 'short', by: 'tomasz', revision: 2, seed: 'kp-3', replicates: REPLICATES, daysAgo: 8.1 },
    { scenario: 'tp-4', by: 'ngozi', revision: 2, seed: 'kp-4', replicates: REPLICATES, daysAgo: 3.2 },
    { scenario: 'control', by: 'ngozi', revision: 2, seed: 'kp-5', replicates: REPLICATES, daysAgo: 3.1 },
    { scenario: 'ak-7', by: 'tomasz', revision: 2, seed: 'kp-6', replicates: REPLICATES, daysAgo: 2.3 },
    { scenario: 'control', by: 'tomasz', revision: 3, seed: 'kp-14', replicates: REPLICATES, daysAgo: 1.01 },
  ],
}
