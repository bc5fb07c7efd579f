/** Starting scenarios from published ranges. Every number says where it comes from; what no source gives is marked as our choice. */
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../schemas/scenario'
import { PRESET_TEXTS } from './preset-sources'
import type { SourceStatus } from './range'

/** `chosen`: no source gives it; picked so that the scenario is complete. */
export type PresetStatus = SourceStatus | 'chosen'
export interface PresetSource {
  /** Path in the scenario document. */
  path: string
  /** What was taken and why, in a sentence. */
  sentence: string
  /** Almanac id or a phrase. */
  source: string
  status: PresetStatus
}
export interface Preset {
  id: string
  title: string
  summary: string
  scenario: Scenario
  sources: PresetSource[]
}

interface Numbers {
  spacingNm: number, diffusionUm2PerS: number, densityPerUm3: number
  rows: number, columns: number, faces: 1 | 2, count: number
  /** Time constants to be met by the closed form [s], with the share of sites. */
  sites: { name: string, share: number, tauS: number }[]
  /** Share of vesicles that move; the rest is a second, immobile kind [1]. */
  mobileShare?: number
  durationS: number, sampleEveryMs: number
}

/** s = 1/(D·ρ·a·τ), to three digits, at most 1: the inverse of the closed form. */
function probabilityFor(numbers: Numbers, tauS: number): number {
  const hitsPerS = numbers.diffusionUm2PerS * numbers.densityPerUm3 * numbers.spacingNm / 1000 * (numbers.mobileShare ?? 1)
  return Math.min(1, Number((1 / (hitsPerS * tauS)).toPrecision(3)))
}

function scenarioOf(title: string, numbers: Numbers): Scenario {
  const { rows, columns, faces, count, mobileShare } = numbers
  const input: ScenarioInput = {
    format: 'moorage-scenario', version: 1, title, notes: 'From published ranges; see each number\'s source.',
    medium: { spacingNm: numbers.spacingNm, diffusionUm2PerS: numbers.diffusionUm2PerS, densityPerUm3: numbers.densityPerUm3, crowding: 'independent' },
    ribbon: { shape: 'plate', rows, columns, faces, classLayout: 'interleaved', count },
    reservoir: { supply: 'held', marginSites: 12 },
    sites: numbers.sites.map(({ name, share, tauS }) => ({ name, share, attachProbability: probabilityFor(numbers, tauS) })),
    vesicles: mobileShare === undefined
      ? [{ name: 'vesicle', share: 1 }]
      : [{ name: 'mobile', share: mobileShare }, { name: 'immobile', share: 1 - mobileShare, mobilityFactor: 0 }],
    schedule: { durationS: numbers.durationS, sampleEveryMs: numbers.sampleEveryMs },
  }
  return ScenarioSchema.parse(input)
}

const NUMBERS: Record<string, Numbers> = {
  'cone': { spacingNm: 45, diffusionUm2PerS: 0.11, densityPerUm3: 1000, rows: 5, columns: 11, faces: 2, count: 13, sites: [{ name: 'quick', share: 0.5, tauS: 0.8 }, { name: 'reluctant', share: 0.5, tauS: 13 }], durationS: 60, sampleEveryMs: 20 },
  'rod': { spacingNm: 45, diffusionUm2PerS: 0.11, densityPerUm3: 1000, rows: 3, columns: 29, faces: 1, count: 1, sites: [{ name: 'site', share: 1, tauS: 0.8 }], durationS: 10, sampleEveryMs: 10 },
  'rod-bipolar': { spacingNm: 40, diffusionUm2PerS: 0.015, densityPerUm3: 1000, rows: 1, columns: 7, faces: 1, count: 37, sites: [{ name: 'site', share: 1, tauS: 4 }], mobileShare: 0.5, durationS: 30, sampleEveryMs: 50 },
  'goldfish-bipolar': { spacingNm: 30, diffusionUm2PerS: 0.015, densityPerUm3: 450, rows: 2, columns: 11, faces: 1, count: 55, sites: [{ name: 'site', share: 1, tauS: 8 }], durationS: 60, sampleEveryMs: 50 },
  'inner-hair-cell': { spacingNm: 37.5, diffusionUm2PerS: 0.11, densityPerUm3: 2000, rows: 3, columns: 5, faces: 2, count: 14, sites: [{ name: 'quick', share: 0.5, tauS: 0.14 }, { name: 'reluctant', share: 0.5, tauS: 3 }], durationS: 15, sampleEveryMs: 5 },
  'saccular-hair-cell': { spacingNm: 34.3, diffusionUm2PerS: 0.11, densityPerUm3: 10_000, rows: 4, columns: 8, faces: 1, count: 20, sites: [{ name: 'site', share: 1, tauS: 0.029 }], durationS: 0.5, sampleEveryMs: 1 },
  'papilla-hair-cell': { spacingNm: 40, diffusionUm2PerS: 0.11, densityPerUm3: 6000, rows: 4, columns: 8, faces: 1, count: 20, sites: [{ name: 'site', share: 1, tauS: 0.0392 }], durationS: 0.5, sampleEveryMs: 1 },
}

const WATCH: PresetSource = { path: 'schedule.durationS', sentence: 'Duration and sampling follow the time constants.', source: 'our choice', status: 'chosen' }

/** The presets, each a valid scenario document with a source for every number. */
export const PRESETS: readonly Preset[] = PRESET_TEXTS.map(({ id, title, summary, sources }) => ({ id, title, summary, sources: [...sources, WATCH], scenario: scenarioOf(title, NUMBERS[id]!) }))
