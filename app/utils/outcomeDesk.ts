/** Keeps the blocks of runs and makes outcomes from them; lives in a worker, or on the page where a worker cannot start. */
import type { Outcome } from '../../shared/schemas/outcome'
import type { RunSave } from '../../shared/schemas/api/run'
import type { Scenario } from '../../shared/schemas/scenario'
import { blockDigest } from '../../shared/walk/digest'
import { frameOf, type OutcomeFrame } from '../../shared/walk/frame'
import { buildOutcome } from '../../shared/walk/outcome'
import type { EngineId, ReplicateBlock } from '../../shared/walk/types'

interface OpenRun { scenario: Scenario, frame: OutcomeFrame, seed: string, blocks: ReplicateBlock[], digests: string[] }
export interface OutcomeAsked { engine: EngineId, partial: boolean, landingError: number }
export type SaveAsked = Pick<RunSave, 'revision' | 'engine' | 'replicatesAsked' | 'partial' | 'digest' | 'durationMs' | 'workers'>

export class OutcomeDesk {
  private readonly runs = new Map<string, OpenRun>()

  /** Opens (or opens anew) the books of a run. */
  open(runId: string, scenario: Scenario, seed: string): void {
    this.runs.set(runId, { scenario, frame: frameOf(scenario), seed, blocks: [], digests: [] })
  }

  /** Adds the next blocks, in order of their replicates. */
  add(runId: string, blocks: readonly ReplicateBlock[]): void {
    const run = this.of(runId)
    for (const block of blocks) {
      run.blocks.push(block)
      run.digests.push(blockDigest(block))
    }
  }

  /** `tail`: the block under way, not yet whole; it is read and not entered. */
  outcome(runId: string, { engine, partial, landingError }: OutcomeAsked, tail?: ReplicateBlock): Outcome {
    const { scenario, frame, seed, blocks, digests } = this.of(runId)
    const [read, named] = tail ? [[...blocks, tail], [...digests, blockDigest(tail)]] : [blocks, digests]
    return buildOutcome({ scenario, frame, seed, engine, blocks: read, blockDigests: named, partial, landingError })
  }

  /** The body of the request that saves a run, as text: the page only passes it on. */
  body(runId: string, asked: SaveAsked): string {
    const { seed, blocks } = this.of(runId)
    return JSON.stringify({ ...asked, seed, blocks } satisfies RunSave)
  }

  blocks(runId: string): ReplicateBlock[] {
    return this.of(runId).blocks
  }

  close(runId: string): void {
    this.runs.delete(runId)
  }

  private of(runId: string): OpenRun {
    const run = this.runs.get(runId)
    if (!run) throw new Error(`The run ${runId} has no books here.`)
    return run
  }
}
