/** What the page, the crew, a worker and the kernel say to each other. Types only. */
import type { Outcome } from '../shared/schemas/outcome'
import type { Scenario } from '../shared/schemas/scenario'
import type { ReplicateRange } from '../shared/walk/merge'
import type { Algorithm, AskedAlgorithm, EngineId, ReplicateBlock, WalkPlan } from '../shared/walk/types'

/** One instance of the kernel (a WASM memory). Deterministic: equal plan, algorithm, seed words and range give equal blocks anywhere. */
export interface Kernel {
  readonly version: string
  /** Builds (or finds in its cache) what the algorithm needs for a plan. */
  prepare(plan: WalkPlan, algorithm: Algorithm): PreparedWalk
}
export interface PreparedWalk {
  readonly algorithm: Algorithm
  /** Bytes of tables held in the kernel's memory. */
  readonly tableBytes: number
  /** Largest total-variation error of the landing law per jump; 0 for exact algorithms. Bound measured when tables are built, or a stated constant. */
  readonly landingError: number
  /** Tables in transferable form, to hand to another worker's `adopt`; null when nothing is worth handing over. */
  exportTables(): ArrayBuffer | null
  adoptTables(tables: ArrayBuffer): void
  /** Walks replicates [from, to) with the streams of seed words (h low, h high). */
  run(seedLow: number, seedHigh: number, from: number, to: number): ReplicateBlock
}

export interface RunOrder {
  scenario: Scenario
  seed: string
  replicates: number
  algorithm: AskedAlgorithm
  /** Stop as soon as the ratio's standard error is at most this (judged at block ends, contiguous prefix); replicates is then the cap. */
  targetStandardError?: number
  /** Walk exactly these blocks, in order from replicate 0 on (to repeat a partial outcome); otherwise the blocks of `replicates`. */
  ranges?: ReplicateRange[]
}

/** What a worker offers, through comlink. One job is prepared at a time; earlier ones are kept while there is room. */
export interface Walker {
  prepare(job: WalkJob, tables?: ArrayBuffer | null): Promise<WalkReady>
  /** Tables of the prepared job in transferable form; null when handing over is not worthwhile. */
  exportTables(): ArrayBuffer | null
  walk(from: number, to: number): ReplicateBlock
  /** Makes the outcome document away from the page's own thread. */
  conclude(scenario: Scenario, result: RunResult): Outcome
  /** The exact refill of an isolated site; null where only a walk tells. */
  exact(scenario: Scenario): ExactRefill | null
}
/** Mean filled sites at the plan's sample times and the time constant that a walk's τ tends to. */
export interface ExactRefill { timesS: number[], filled: number[], tauS: number | null }
export interface WalkJob { scenario: Scenario, algorithm: Algorithm, seed: string }
export interface WalkReady { version: string, tableBytes: number, landingError: number, prepareMs: number }
export interface RunProgress {
  replicatesDone: number
  replicates: number
  /** Contiguous replicates from 0 on; the last block may be cut short. */
  blocks: ReplicateBlock[]
  elapsedMs: number
  remainingMs: number | null
  workers: number
}
export interface RunResult {
  engine: EngineId
  seed: string
  /** Replicates in `blocks`. */
  replicates: number
  replicatesAsked: number
  partial: boolean
  blocks: ReplicateBlock[]
  durationMs: number
  workers: number
  landingError: number
}
/** `crew.run(order, options)`: resolves with the finished or (after abort) partial result; rejects only on a fault. */
export interface Crew {
  run(order: RunOrder, options?: { onProgress?: (progress: RunProgress) => void, signal?: AbortSignal }): Promise<RunResult>
  /** A quick walk on a worker kept warm for it; a newer call supersedes an older one (which resolves null). Seed text `preview`. `onGrowth` gets what there is after each chunk. */
  preview(scenario: Scenario, replicates: number, onGrowth?: (result: RunResult) => void): Promise<RunResult | null>
  /** The outcome document of a result, made in a worker. */
  conclude(scenario: Scenario, result: RunResult): Promise<Outcome>
  /** The exact refill of an isolated site, solved in a worker; null where only a walk tells. */
  exact(scenario: Scenario): Promise<ExactRefill | null>
  /** Measured over estimated time per replicate on this machine, for `estimateCost`; 1 before the first run. */
  readonly pace: number
  /** Ends all workers. */
  dismiss(): void
  readonly size: number
}
