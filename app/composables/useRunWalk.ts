/** Drives one run through the crew: progress, Monte Carlo error, partial outcomes at intervals, the finished one. */
import { frameOf } from '#shared/walk/frame'
import { estimateCost } from '#shared/walk/cost'
import { RatioPrecision } from '#shared/walk/tallies'
import type { EngineId, ReplicateBlock } from '#shared/walk/types'
import type { RunProgress, RunResult } from '~~/workers/protocol'
import { KERNEL_VERSION } from '~~/workers/kernel/version'
import type { LocalRun } from '~/utils/localRun'
import type { Desk } from '~/composables/useOutcomeDesk'

/** A partial outcome is made at most this often [ms], and takes at most a fifth of the time between two. */
const PARTIAL_EVERY_MS = 800

/** An error from fewer replicates than these is a guess. */
const FEWEST = 5

/** Only the per-replicate rows from a replicate on: what the Monte Carlo error reads. */
function rowsFrom(block: ReplicateBlock, from: number): ReplicateBlock {
  const cut = (rows: number[][]) => rows.map(row => row.slice(from - block.from))
  return { ...block, from, events: cut(block.events), exposureSteps: cut(block.exposureSteps), ...(block.declinedExposure ? { declinedExposure: cut(block.declinedExposure) } : {}) }
}

/** The books of one run while it is walked: whole blocks go to the desk, the one under way is only looked at. */
class WalkBooks {
  blocks: ReplicateBlock[] = []
  private tail: ReplicateBlock | undefined
  private readonly precision: RatioPrecision
  private read = 0
  private pending: Promise<unknown> = Promise.resolve()

  constructor(private readonly run: LocalRun, private readonly desk: Desk) {
    this.precision = new RatioPrecision(frameOf(run.asked.scenario))
  }

  /** Takes what there is so far. All blocks but the last are whole; the last may be cut short. */
  take(all: readonly ReplicateBlock[]): void {
    const entered = all.slice(0, -1)
    const fresh = entered.slice(this.blocks.length)
    this.blocks = entered
    this.tail = all.at(-1)
    if (fresh.length > 0) this.pending = this.pending.then(() => this.desk.add(this.run.localId, fresh))
    this.measure(all)
  }

  /** The final blocks. A run with a target groups them anew; then the desk's books are opened again, which digests every block once more. */
  conclude(blocks: ReplicateBlock[]): void {
    const { localId, asked } = this.run
    const grown = this.blocks.every((block, i) => blocks[i]?.from === block.from && blocks[i]?.to === block.to)
    const fresh = grown ? blocks.slice(this.blocks.length) : blocks
    if (!grown) this.pending = this.pending.then(() => this.desk.open(localId, asked.scenario, asked.seed))
    if (fresh.length > 0) this.pending = this.pending.then(() => this.desk.add(localId, fresh))
    this.blocks = blocks
    this.tail = undefined
    this.measure(blocks)
    const end = blocks.at(-1)?.to ?? 0
    this.run.precision = this.run.precision.filter(point => point.replicates <= end)
  }

  /** After a fault: what there was counts. */
  keepTail(): void {
    this.conclude(this.tail ? [...this.blocks, this.tail] : this.blocks)
  }

  private measure(all: readonly ReplicateBlock[]): void {
    const end = all.at(-1)?.to ?? 0
    if (end <= this.read) return
    for (const block of all) if (block.to > this.read) this.precision.add(rowsFrom(block, Math.max(block.from, this.read)))
    this.read = end
    const found = this.precision.read()
    if (found && found.replicates >= FEWEST) this.run.precision = [...this.run.precision, { replicates: found.replicates, standardError: found.standardError }]
  }

  /** Nothing is on its way to the desk any more. */
  settled(): Promise<unknown> {
    return this.pending
  }

  /** Of what is entered at the call: a tail read later may lie beyond the blocks that the desk has by then. */
  outcome(engine: EngineId, partial: boolean, landingError: number) {
    const { tail } = this
    return this.pending.then(() => this.desk.outcome(this.run.localId, { engine, partial, landingError }, tail))
  }
}

export function useRunWalk() {
  const crew = useCrew()

  async function walk(run: LocalRun, signal: AbortSignal, stop: () => void): Promise<ReplicateBlock[]> {
    const { asked } = run
    const limitMs = (asked.timeLimitS ?? Infinity) * 1000
    const desk = await useOutcomeDesk()
    await desk.open(run.localId, asked.scenario, asked.seed)
    const books = new WalkBooks(run, desk)
    const engine: EngineId = { name: 'moorage-walk', version: KERNEL_VERSION, algorithm: estimateCost(asked.scenario, asked.replicates, asked.algorithm).algorithm ?? 'step' }
    run.engine = engine
    let nextAt = 0
    let idle = true

    async function partial() {
      idle = false
      const startedAt = performance.now()
      try {
        const outcome = await books.outcome(engine, true, 0)
        if (run.state === 'running') run.outcome = outcome
      } finally {
        const now = performance.now()
        nextAt = now + Math.max(PARTIAL_EVERY_MS, 4 * (now - startedAt))
        idle = true
      }
    }
    function onProgress(progress: RunProgress) {
      Object.assign(run, { replicatesDone: progress.replicatesDone, elapsedMs: progress.elapsedMs, remainingMs: progress.remainingMs, workers: progress.workers })
      books.take(progress.blocks)
      if (progress.blocks.length > 0 && idle && performance.now() > nextAt) void partial()
      if (progress.elapsedMs > limitMs) stop()
    }

    let result: RunResult | undefined
    try {
      result = await crew.run({
        scenario: asked.scenario, seed: asked.seed, replicates: asked.replicates, algorithm: asked.algorithm,
        ...(asked.ranges && { ranges: asked.ranges }),
        ...(asked.targetStandardError !== undefined && { targetStandardError: asked.targetStandardError }),
      }, { onProgress, signal })
      books.conclude(result.blocks)
    } catch (thrown) {
      books.keepTail()
      const kept = books.blocks.length > 0 ? 'The replicates before it are kept as a partial outcome.' : 'Nothing was kept.'
      run.problem = `The walk broke off: ${thrown instanceof Error ? thrown.message : String(thrown)} ${kept}`
    }
    await finish(run, result, books)
    return books.blocks
  }

  async function finish(run: LocalRun, result: RunResult | undefined, books: WalkBooks) {
    run.engine = result?.engine ?? run.engine
    run.landingError = result?.landingError ?? 0
    run.durationMs = result?.durationMs ?? run.elapsedMs
    run.workers = result?.workers ?? run.workers
    const partial = result?.partial ?? true
    await books.settled()
    if (books.blocks.length > 0) {
      run.outcome = await books.outcome(run.engine!, partial, run.landingError)
      run.replicatesDone = run.outcome.replicates
    } else {
      run.outcome = null
      run.problem ??= 'It was stopped before a replicate was complete, so nothing was kept.'
    }
    run.finishedAt = new Date().toISOString()
    run.stopping = false
    run.state = result ? (partial ? 'stopped' : 'done') : 'failed'
  }
  return { walk }
}
