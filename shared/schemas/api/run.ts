/** Bodies of runs. The browser sends blocks; every figure and interval is made again from them on the server. */
import { z } from 'zod'
import { SCENARIO_LIMITS, seedProblem, type Scenario } from '../scenario'
import type { Outcome } from '../outcome'
import type { ReplicateBlock } from '../../walk/types'

const count = z.number().int().nonnegative().max(Number.MAX_SAFE_INTEGER)
const row = z.array(count).max(100_000)
export const ReplicateBlockSchema: z.ZodType<ReplicateBlock> = z.strictObject({
  from: count, to: count,
  filledSum: z.array(row).max(2), filledSumSq: z.array(row).max(2), totalSumSq: row.optional(),
  readySum: z.array(row).max(2).optional(), readySumSq: z.array(row).max(2).optional(),
  firstAttachment: row, events: z.array(row).max(2), exposureSteps: z.array(row).max(2), declinedExposure: z.array(row).max(2).optional(),
})
export const SAVED_REPLICATES_LIMIT = 50_000
/** A seed is a text, kept exactly; 1 to 200 characters as people count them. */
export const SeedSchema = z.string().min(1, 'A seed has at least one character.').superRefine((text, context) => {
  const message = seedProblem(text)
  if (message) context.addIssue({ code: 'custom', message })
})
  // Half of a surrogate pair has no UTF-8 bytes, so no digest could cover it.
  .refine(seed => !/\p{Surrogate}/u.test(seed), 'A seed is whole characters; half of one was read.')

/** POST /api/scenarios/:scenarioId/runs with Idempotency-Key (1…200 characters) → RunDetail (201; 200 when the key was seen) */
export const RunSaveSchema = z.strictObject({
  revision: z.number().int().positive(),
  seed: SeedSchema,
  engine: z.strictObject({ name: z.literal('moorage-walk'), version: z.string().max(20), algorithm: z.enum(['stirred', 'attempt', 'touch', 'step']) }),
  replicatesAsked: z.number().int().min(1).max(SCENARIO_LIMITS.replicates[1]),
  blocks: z.array(ReplicateBlockSchema).min(1).max(1001),
  partial: z.boolean(),
  /** The digest that the browser computed; the server's own must equal it. */
  digest: z.string().max(64),
  durationMs: z.number().nonnegative(),
  workers: z.number().int().min(1).max(64),
})
/** GET …/runs?bin=0|1&cursor=&limit= */
export const RunListSchema = z.strictObject({
  bin: z.enum(['0', '1']).default('0'), cursor: z.string().max(500).default(''), limit: z.coerce.number().int().min(1).max(100).default(25),
})
export type RunSave = z.infer<typeof RunSaveSchema>

/** `waiting`: audit not done yet · `audited`: redrawn blocks were equal · `refused`: a redrawn block differed, not reproducible · `cannot`: engine version unknown here. */
export interface RunAudit { state: 'waiting' | 'audited' | 'refused' | 'cannot', blocksRedrawn: number, blocks: number, /** Chance that one forged block would have been found. */ detection: number, at: string | null }
/** GET /api/benches/:benchId/runs · GET /api/scenarios/:scenarioId/runs → Page<RunRow> */
export interface RunRow {
  runId: string, number: number, scenarioId: string, title: string, revision: number, seed: string, replicates: number, partial: boolean
  algorithm: string, engineVersion: string, savedBy: string, savedAt: string, deletedAt: string | null
  verdict: Outcome['agreement']['verdict'], ratio: Outcome['ratio'], audit: RunAudit, mayDelete: boolean
}
/** GET /api/runs/:runId · DELETE (bin) · POST /api/runs/:runId/restore · GET /api/runs/:runId/blocks → ReplicateBlock[] */
export interface RunDetail extends RunRow {
  benchId: string, outcome: Outcome, durationMs: number, workers: number, replicatesAsked: number
  /** What was walked: a run stays readable whatever becomes of its scenario. */
  document: Scenario
  /** Its scenario lies in the bin, or did for too long. */
  scenarioBinned: boolean
}
