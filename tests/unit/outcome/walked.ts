/** Runs of the real kernel in this thread, for tests of what is read out of them. */
import { readFileSync } from 'node:fs'
import { createKernel } from '../../../workers/engine'
import { ScenarioSchema, type Scenario, type ScenarioInput } from '../../../shared/schemas/scenario'
import { blockRanges } from '../../../shared/walk/merge'
import { buildOutcome } from '../../../shared/walk/outcome'
import { compilePlan } from '../../../shared/walk/plan'
import { seedWords } from '../../../shared/walk/streams'
import type { Algorithm, ReplicateBlock, WalkPlan } from '../../../shared/walk/types'

export const kernel = await createKernel(readFileSync(new URL('../../../workers/kernel/kernel.wasm', import.meta.url)))

/** A small stirred ribbon of the trade's lattice (invented numbers otherwise), bent to the case. */
export function smallScenario(bend: Partial<ScenarioInput> = {}): Scenario {
  return ScenarioSchema.parse({
    format: 'moorage-scenario', version: 1, title: 'Small',
    medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' },
    ribbon: { shape: 'plate', rows: 4, columns: 5, faces: 1, classLayout: 'interleaved' },
    reservoir: { supply: 'stirred' },
    sites: [{ name: 'site', share: 1, attachProbability: 0.5 }],
    vesicles: [{ name: 'vesicle', share: 1 }],
    schedule: { durationS: 1.5, sampleEveryMs: 50 },
    ...bend,
  })
}

/** Blocks of a run, in canonical cuts; `altered` walks another plan than the scenario says. */
export function walkBlocks(scenario: Scenario, algorithm: Algorithm, seed: string, replicates: number, altered: WalkPlan = compilePlan(scenario)): ReplicateBlock[] {
  const walk = kernel.prepare(altered, algorithm), [low, high] = seedWords(seed)
  return blockRanges(replicates).map(({ from, to }) => walk.run(low, high, from, to))
}

export const engineOf = (algorithm: Algorithm) => ({ name: 'moorage-walk' as const, version: kernel.version, algorithm })

export function walkOutcome(scenario: Scenario, algorithm: Algorithm, seed: string, replicates: number, altered?: WalkPlan) {
  return buildOutcome({ scenario, seed, engine: engineOf(algorithm), blocks: walkBlocks(scenario, algorithm, seed, replicates, altered), partial: false, landingError: 0 })
}
