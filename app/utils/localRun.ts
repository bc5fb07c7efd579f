/** A run on this device: what was asked, how far it is, what it found, and whether the bench has it. */
import type { Outcome } from '#shared/schemas/outcome'
import type { Scenario } from '#shared/schemas/scenario'
import type { ReplicateRange } from '#shared/walk/merge'
import type { AskedAlgorithm, EngineId } from '#shared/walk/types'

/** `run`: to be saved where it may be · `again`: repeats a saved outcome to compare digests · `check`: step by step within a time, never saved. */
export type RunPurpose = 'run' | 'again' | 'check'
export interface RunStart {
  scenario: Scenario
  scenarioId: string | null
  revision: number | null
  title: string
  /** Empty: one is made. */
  seed?: string
  replicates: number
  algorithm: AskedAlgorithm
  targetStandardError?: number
  purpose?: RunPurpose
  /** Walk exactly these blocks, to repeat an outcome that stopped early. */
  ranges?: ReplicateRange[]
  /** Digest of the outcome that it repeats or checks. */
  of?: string
  /** Stop when this time is over [s]. */
  timeLimitS?: number
}
export type RunState = 'running' | 'done' | 'stopped' | 'failed'
/** `local`: belongs to no revision, or may not be saved · `unsent`: kept, will be sent · `refused`: the server said why · `file`: larger than a saved run may be. */
export type SendState = 'local' | 'unsent' | 'sending' | 'sent' | 'refused' | 'file'
export interface PrecisionPoint { replicates: number, standardError: number }

export interface LocalRun {
  readonly localId: string
  readonly userId: string
  readonly asked: Readonly<RunStart & { seed: string, purpose: RunPurpose }>
  readonly startedAt: string
  state: RunState
  /** Asked to stop; the last block is coming in. */
  stopping: boolean
  replicatesDone: number
  elapsedMs: number
  remainingMs: number | null
  workers: number
  precision: PrecisionPoint[]
  /** Partial while it runs. */
  outcome: Outcome | null
  engine: EngineId | null
  landingError: number
  durationMs: number
  problem: string | null
  finishedAt: string | null
  /** Where its finished outcome is kept besides this page's memory. */
  kept: 'device' | 'memory' | 'none'
  send: { state: SendState, reason: string | null, runId: string | null, number: number | null, savedAt: string | null }
}

/** Replicates that the run is to reach. */
export const wantedReplicates = (asked: Pick<RunStart, 'replicates' | 'ranges'>): number => asked.ranges?.at(-1)?.to ?? asked.replicates

const SEED_LETTERS = 'abcdefghjkmnpqrstuvwxyz23456789'
const random = (length: number) => crypto.getRandomValues(new Uint8Array(length))
/** A seed for a person to keep: two groups of four easy letters. */
export function makeSeed(): string {
  const letters = [...random(8)].map(byte => SEED_LETTERS[byte % SEED_LETTERS.length])
  return `${letters.slice(0, 4).join('')}-${letters.slice(4).join('')}`
}
/** Works without a secure context, where `randomUUID` is missing. */
export const makeLocalId = (): string => [...random(16)].map(byte => byte.toString(16).padStart(2, '0')).join('')

export function newLocalRun(start: RunStart, userId: string, startedAt: string): LocalRun {
  // A document under the pen is reactive; a copy of it can be handed to workers and kept on the device.
  const scenario = JSON.parse(JSON.stringify(start.scenario)) as Scenario
  return {
    localId: makeLocalId(), userId, asked: { ...start, scenario, seed: start.seed?.trim() || makeSeed(), purpose: start.purpose ?? 'run' }, startedAt,
    state: 'running', stopping: false, replicatesDone: 0, elapsedMs: 0, remainingMs: null, workers: 0, precision: [], outcome: null, engine: null, landingError: 0,
    durationMs: 0, problem: null, finishedAt: null, kept: 'none',
    send: { state: belongsToBench(start, userId) ? 'unsent' : 'local', reason: null, runId: null, number: null, savedAt: null },
  }
}

/** Whether its outcome goes to the bench: a run of a saved revision by somebody who is signed in. */
export const belongsToBench = (start: RunStart, userId: string): boolean =>
  (start.purpose ?? 'run') === 'run' && start.scenarioId !== null && start.revision !== null && userId !== 'nobody'

/** Finished, and where it went is known: saved, refused, kept for later, or never meant to be sent. */
export function isSettled(run: Pick<LocalRun, 'state' | 'outcome' | 'send'>): boolean {
  if (run.state === 'running') return false
  if (run.outcome === null) return true
  return run.send.state !== 'sending' && !(run.send.state === 'unsent' && run.send.reason === null)
}

/** Whether leaving the page would lose something: a run under way, or an outcome that neither device nor server keeps. */
export const wouldBeLost = (run: LocalRun): boolean =>
  run.state === 'running' || (run.asked.purpose === 'run' && run.outcome !== null && run.kept !== 'device' && run.send.state !== 'sent')
