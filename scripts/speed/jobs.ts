/** The jobs that are timed, as scenario documents: lengths and densities of our own, ratios in voxels as the rows name them. */
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../../shared/schemas/scenario'

const base = { format: 'moorage-scenario', version: 1, notes: '', vesicles: [{ name: 'vesicle', share: 1 }] } satisfies Partial<ScenarioInput>
/** ρa³ = 0.201386 at 50 nm; Δt = 3.0682 ms, so that 2 s are 652 steps. */
const DENSE = { spacingNm: 50, diffusionUm2PerS: 0.135802, densityPerUm3: 1611.088 }
const FLOOR_54 = { shape: 'plate', rows: 9, columns: 6, faces: 1, classLayout: 'interleaved' } as const
/** 44 voxels of 50 nm an edge. */
const SEALED_44 = { supply: 'sealed', sizeUm: [2.2, 2.2, 2.2] as [number, number, number] } as const
const CERTAIN = [{ name: 'site', share: 1, attachProbability: 1 }]

const parse = (input: ScenarioInput): Scenario => ScenarioSchema.parse(input)

/** 54 sites on the floor of a sealed terminal of 44³ voxels, every touch attaches, 2 s. */
export const shortSealed = parse({
  ...base, title: 'Short sealed refill', medium: { ...DENSE, crowding: 'independent' }, ribbon: FLOOR_54, reservoir: SEALED_44,
  sites: CERTAIN, schedule: { durationS: 2, sampleEveryMs: 20 },
})

/** The same ribbon before a held bath, with exclusion: 18 × 21 × 7 voxels. */
export const exclusiveHeld = parse({
  ...base, title: 'Exclusive held refill', medium: { ...DENSE, crowding: 'exclusive' }, ribbon: FLOOR_54, reservoir: { supply: 'held', marginSites: 6 },
  sites: CERTAIN, schedule: { durationS: 2, sampleEveryMs: 20 },
})

/** The same where sites attach seldom, so that every replicate walks to its end: the job of two workers. */
export const exclusiveLong = parse({
  ...base, title: 'Long exclusive refill', medium: { ...DENSE, crowding: 'exclusive' }, ribbon: FLOOR_54, reservoir: { supply: 'held', marginSites: 12 },
  sites: [{ name: 'site', share: 1, attachProbability: 0.01 }], schedule: { durationS: 6, sampleEveryMs: 50 },
})

/** 6 × 8 sites on both faces of a free plate, quick and reluctant ones, 60 s in a sealed terminal of 40³ voxels: 14,400 steps. */
export const longSealed = parse({
  ...base, title: 'Long sealed recovery', medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' },
  ribbon: { shape: 'plate', rows: 6, columns: 8, faces: 2, classLayout: 'interleaved' }, reservoir: { supply: 'sealed', sizeUm: [2, 2, 2] },
  sites: [{ name: 'quick', share: 0.6, attachProbability: 0.3 }, { name: 'reluctant', share: 0.4, attachProbability: 0.0125 }],
  schedule: { durationS: 60, sampleEveryMs: 200 },
})
