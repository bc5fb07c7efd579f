/** What the server and its examining thread say to each other. */
import type { RunSave } from '../../shared/schemas/api/run'
import type { Outcome } from '../../shared/schemas/outcome'
import type { ProblemCode } from '../../shared/schemas/problem'
import type { Scenario } from '../../shared/schemas/scenario'
import type { Algorithm } from '../../shared/walk/types'
import type { RefusalParts } from '../utils/problem'

export type ExaminerJob
  = | { kind: 'parse', raw: Uint8Array }
    | { kind: 'examine', scenario: Scenario }
    | { kind: 'prepare', scenario: Scenario, algorithm: Algorithm, seed: string }
    | { kind: 'walk', from: number, to: number }
export interface ExaminerValues {
  parse: { revision: number }
  examine: { run: RunSave, outcome: Outcome }
  prepare: { version: string }
  walk: { digest: string }
}
export interface ExaminerAnswer { id: number, value?: unknown, refused?: { code: ProblemCode, parts: RefusalParts }, failed?: string }
