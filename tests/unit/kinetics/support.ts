/** A small scenario that tests bend to their case. */
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../../../shared/schemas/scenario'

export type Bend = { [K in keyof ScenarioInput]?: ScenarioInput[K] extends unknown[] ? ScenarioInput[K] : ScenarioInput[K] extends object ? Partial<ScenarioInput[K]> | ScenarioInput[K] : ScenarioInput[K] }

/** The scenario of the design's example, stirred, with the given parts replaced or merged. */
export function scenarioWith(bend: Bend = {}): Scenario {
  const base: ScenarioInput = {
    format: 'moorage-scenario', version: 1, title: 'Test',
    medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' },
    ribbon: { shape: 'plate', rows: 4, columns: 6, faces: 2, classLayout: 'interleaved' },
    reservoir: { supply: 'stirred' },
    sites: [{ name: 'quick', share: 0.6, attachProbability: 0.3 }, { name: 'reluctant', share: 0.4, attachProbability: 0.0125 }],
    vesicles: [{ name: 'vesicle', share: 1 }],
    schedule: { durationS: 60, sampleEveryMs: 20 },
  }
  return ScenarioSchema.parse({
    ...base, ...bend,
    medium: { ...base.medium, ...bend.medium }, schedule: { ...base.schedule, ...bend.schedule },
    ribbon: bend.ribbon?.shape ? bend.ribbon : { ...base.ribbon, ...bend.ribbon },
  })
}
