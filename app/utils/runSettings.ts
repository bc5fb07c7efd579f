/** What a person chooses about a run before setting it going; not part of the scenario. */
import { seedProblem } from '#shared/schemas/scenario'
import type { AskedAlgorithm } from '#shared/walk/types'

export interface RunSettings {
  aim: 'replicates' | 'precision'
  replicates: number
  /** A replicates text that could not be used, kept as typed. */
  wrongReplicates?: string
  /** Wanted standard error of the ratio walk / closed form [1]. */
  standardError: number
  /** The same for its text. */
  wrongStandardError?: string
  seed: string
  algorithm: AskedAlgorithm
}
export const DEFAULT_RUN: RunSettings = { aim: 'replicates', replicates: 200, standardError: 0.01, seed: '', algorithm: 'auto' }

/** How many of the settings keep a run from starting. */
export function wrongSettings(run: RunSettings): number {
  const wrong = [run.wrongReplicates, run.aim === 'precision' ? run.wrongStandardError : undefined, seedProblem(run.seed) ?? undefined]
  return wrong.filter(one => one !== undefined).length
}
