/** What the page, the crew, a worker and the kernel say to each other. Types only. */
import type { Scenario } from '../shared/schemas/scenario'
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
}
export interface RunProgress {
  replicatesDone: number
  replicates: number
  /** Contiguous finished blocks from replicate 0 on. */
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
  /** A quick walk on a worker kept warm for it; a newer call supersedes an older one (which resolves null). Seed text `preview`. */
  preview(scenario: Scenario, replicates: number): Promise<RunResult | null>
  /** Ends all workers. */
  dismiss(): void
  readonly size: number
}
