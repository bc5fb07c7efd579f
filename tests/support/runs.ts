/** Real runs of the committed kernel, as a browser would send them; the blocks may be changed on the way. */
import { RunSaveSchema, type RunSave } from '../../shared/schemas/api/run'
import { ScenarioSchema, type ScenarioInput } from '../../shared/schemas/scenario'
import { blockDigest, outcomeDigest, scenarioDigest } from '../../shared/walk/digest'
import { blockRanges } from '../../shared/walk/merge'
import { routeAlgorithm } from '../../shared/walk/route'
import type { Algorithm } from '../../shared/walk/types'
import { inlineWalker } from '../../workers/node'

const walker = inlineWalker()

export interface RunWishes { seed?: string, replicates?: number, revision?: number, algorithm?: Algorithm, forge?: (run: RunSave) => void }

/** A walked run as the body of a request. `forge` changes blocks before the digest is made, so that only content can give it away. */
export async function runBody(input: ScenarioInput, wishes: RunWishes = {}): Promise<RunSave> {
  const scenario = ScenarioSchema.parse(input)
  const { seed = 'test', replicates = 120, revision = 1 } = wishes
  const algorithm = wishes.algorithm ?? routeAlgorithm(scenario).algorithm!
  const { version } = await walker.prepare({ scenario, algorithm, seed }, null)
  const blocks = await Promise.all(blockRanges(replicates).map(({ from, to }) => walker.walk(from, to)))
  const run: RunSave = { revision, seed, engine: { name: 'moorage-walk', version, algorithm }, replicatesAsked: replicates, blocks, partial: false, digest: '', durationMs: 12, workers: 1 }
  wishes.forge?.(run)
  run.digest = digestOfRun(scenario, run)
  return RunSaveSchema.parse(run)
}

export const digestOfRun = (scenario: ReturnType<typeof ScenarioSchema.parse>, run: RunSave): string => outcomeDigest({
  scenarioDigest: scenarioDigest(scenario), engine: run.engine, seed: run.seed, replicates: run.blocks.at(-1)!.to, blockDigests: run.blocks.map(blockDigest),
})
