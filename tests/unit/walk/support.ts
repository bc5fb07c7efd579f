/** Small scenarios, arbitrary ones too, and the two engines that every walk test can ask. */
import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../../../shared/schemas/scenario'
import { createKernel } from '../../../workers/engine'
import type { Kernel } from '../../../workers/protocol'
import { referenceKernel } from '../../../workers/reference/walk'

/** The committed kernel, a fresh instance. */
export const freshKernel = (): Promise<Kernel> => createKernel(readFileSync(new URL('../../../workers/kernel/kernel.wasm', import.meta.url)))

/** Both engines by name. */
export const bothKernels = async (): Promise<[string, Kernel][]> => [['reference', referenceKernel], ['wasm', await freshKernel()]]

export interface Change {
  medium?: Partial<ScenarioInput['medium']>
  ribbon?: ScenarioInput['ribbon']
  reservoir?: ScenarioInput['reservoir']
  sites?: ScenarioInput['sites']
  vesicles?: ScenarioInput['vesicles']
  schedule?: Partial<ScenarioInput['schedule']>
}

/** A small invented scenario (2 × 3 sites on a wall, margin 4), changed as a test wishes. */
export function smallScenario(change: Change = {}): Scenario {
  return ScenarioSchema.parse({
    format: 'moorage-scenario', version: 1, title: 'Small',
    medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 1600, crowding: 'independent', ...change.medium },
    ribbon: change.ribbon ?? { shape: 'plate', rows: 2, columns: 3, faces: 1, classLayout: 'rows' },
    reservoir: change.reservoir ?? { supply: 'held', marginSites: 4 },
    sites: change.sites ?? [{ name: 'quick', share: 1, attachProbability: 0.5 }],
    vesicles: change.vesicles ?? [{ name: 'vesicle', share: 1 }],
    schedule: { durationS: 0.25, sampleEveryMs: 20, ...change.schedule },
  })
}

// Hundredths rather than doubles: fast-check favours doubles near 0, and such walks attach nothing.
const probability = fc.oneof({ weight: 1, arbitrary: fc.constantFrom(0, 1, 1e-7) }, { weight: 4, arbitrary: fc.integer({ min: 1, max: 99 }).map(n => n / 100) })
const rate = fc.oneof(fc.constant(0), fc.integer({ min: 1, max: 60 }))
const site = fc.record({ name: fc.constant('s'), attachProbability: probability, detachPerS: rate, readyPerS: fc.option(fc.integer({ min: 1, max: 200 })) })
const vesicle = fc.record({ name: fc.constant('v'), attachFactor: probability, mobilityFactor: probability })
const oneOrTwo = <T>(item: fc.Arbitrary<T>) => fc.oneof(
  item.map(one => [{ ...one, share: 1 }]),
  fc.tuple(item, item, fc.constantFrom(0.25, 0.5, 0.6)).map(([one, other, share]) => [{ ...one, share }, { ...other, share: 1 - share }]),
)
const ribbon = fc.record({
  shape: fc.constant('plate' as const), rows: fc.integer({ min: 1, max: 3 }), columns: fc.integer({ min: 1, max: 3 }),
  faces: fc.constantFrom(1 as const, 2 as const), classLayout: fc.constantFrom('rows' as const, 'interleaved' as const),
})
const sealed = fc.tuple(...[0, 1, 2].map(() => fc.integer({ min: 3, max: 8 }))).map(voxels => ({ supply: 'sealed' as const, sizeUm: voxels.map(n => n * 0.05) as [number, number, number] }))
const releases = fc.array(fc.record({ atMs: fc.integer({ min: 1, max: 790 }), fraction: probability }), { maxLength: 3 })
  .map(list => list.sort((one, other) => one.atMs - other.atMs).filter((one, i) => i === 0 || one.atMs > list[i - 1]!.atMs))

/** Small scenarios with every feature switched on or off at random. */
export const anyScenario = (supply: 'stirred' | 'lattice'): fc.Arbitrary<Scenario> => fc.record({
  medium: fc.record({ densityPerUm3: fc.constantFrom(100, 800, 1600, 3200, 6000), crowding: fc.constantFrom('independent' as const, 'exclusive' as const) }),
  ribbon: fc.oneof(ribbon, ribbon, fc.constant({ shape: 'isolated' as const })),
  reservoir: supply === 'stirred'
    ? fc.constant({ supply: 'stirred' as const })
    : fc.oneof(sealed, fc.constant({ supply: 'held' as const, marginSites: 4 })),
  sites: oneOrTwo(site),
  vesicles: oneOrTwo(vesicle),
  schedule: fc.record({
    durationS: fc.constantFrom(0.1, 0.333, 0.8), sampleEveryMs: fc.constantFrom(3, 20, 50), initialFill: probability,
    releases, decline: fc.option(fc.record({ restFactor: probability, timeConstantS: fc.constantFrom(0.01, 0.1, 1) })),
  }),
}).map(change => ({
  ...change,
  sites: change.ribbon.shape === 'isolated' ? [{ ...change.sites[0]!, share: 1 }] : change.sites,
  schedule: { ...change.schedule, releases: change.schedule.releases.filter(one => one.atMs < change.schedule.durationS * 1000) },
})).map(smallScenario)
