/** Scenarios of the demo bench and the sample of the front page. All invented: no real animals, cells or people. */
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../schemas/scenario'

const NOTES = 'Invented demo: isolated bipolar terminal of the marl newt (stock MN-3), room temperature.'

/** What the demo bench's scenarios share; each says what differs. */
function bench(title: string, notes: string, differs: { quickShare?: number, quick?: number, initialFill?: number, supply?: 'held' | 'stirred', crowding?: 'independent' | 'exclusive' } = {}): Scenario {
  const quickShare = differs.quickShare ?? 0.6
  const input: ScenarioInput = {
    format: 'moorage-scenario', version: 1, title, notes: `${NOTES} ${notes}`,
    medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: differs.crowding ?? 'independent' },
    ribbon: { shape: 'plate', rows: 4, columns: 6, faces: 2, classLayout: 'interleaved', count: 12 },
    reservoir: differs.supply === 'stirred' ? { supply: 'stirred' } : { supply: 'held', marginSites: 12 },
    sites: [
      { name: 'quick', share: quickShare, attachProbability: differs.quick ?? 0.3 },
      { name: 'reluctant', share: Number((1 - quickShare).toFixed(6)), attachProbability: 0.0125 },
    ],
    vesicles: [{ name: 'vesicle', share: 1 }],
    schedule: { durationS: 60, sampleEveryMs: 20, initialFill: differs.initialFill ?? 0.12 },
  }
  return ScenarioSchema.parse(input)
}

export interface DemoScenario {
  /** Stable key, for seeding and for addresses. */
  key: 'control' | 'ak-7' | 'tp-4' | 'short' | 'stirred' | 'exclusive'
  tags: string[]
  scenario: Scenario
}

/** The six scenarios of the invented Kestrel Point Ribbon Bench. */
export const DEMO_SCENARIOS: readonly DemoScenario[] = [
  { key: 'control', tags: ['control'], scenario: bench('Control, 200 ms step', 'A 200 ms step empties 88 % of the sites.') },
  { key: 'ak-7', tags: ['drug'], scenario: bench('AK-7, 20 µM', 'The invented compound AK-7 lowers attachment at the quick sites to a quarter.', { quick: 0.075 }) },
  { key: 'tp-4', tags: ['peptide'], scenario: bench('TP-4 peptide, 50 µM', 'The invented tether peptide TP-4 leaves fewer sites quick.', { quickShare: 0.2 }) },
  { key: 'short', tags: ['control', 'short step'], scenario: bench('Control, 25 ms step', 'A short step empties 35 % of the sites.', { initialFill: 0.65 }) },
  { key: 'stirred', tags: ['control', 'closed form'], scenario: bench('Control, stirred supply', 'The closed form\'s own assumption: the neighbourhood never empties.', { supply: 'stirred' }) },
  { key: 'exclusive', tags: ['control', 'crowding'], scenario: bench('Control, exclusive', 'One vesicle a voxel: what mutual exclusion alone does.', { crowding: 'exclusive' }) },
]

/** The sample that a stranger may open and run on the front page; nothing of it is stored. */
export const SAMPLE_SCENARIO: Scenario = bench('Sample: isolated bipolar terminal, 200 ms step', 'A 200 ms step empties 88 % of the sites.', { supply: 'stirred' })
/** Seed text of the sample's first run. */
export const SAMPLE_SEED = 'sample'
