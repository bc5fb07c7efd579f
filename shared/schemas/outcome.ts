/** The `moorage-outcome` document, version 1: what a run found. Every number is made from replicate blocks by `walk/outcome.ts`. */
import { z } from 'zod'

const number = z.number()
const maybe = z.strictObject({ value: number.nullable(), low: number.nullable(), high: number.nullable() })

export const OutcomeClassSchema = z.strictObject({
  name: z.string(),
  sites: z.number().int(),
  attachProbability: number,
  /** Mean filled sites of one ribbon at timesS, and the variance between replicates. */
  meanFilled: z.array(number),
  varFilled: z.array(number),
  /** Only where a class has readyPerS. */
  meanReady: z.array(number).optional(),
  varReady: z.array(number).optional(),
  events: number,
  exposureS: number,
  tau: z.strictObject({ valueS: number.nullable(), lowS: number.nullable(), highS: number.nullable() }),
  closedFormTauS: number.nullable(),
  ratio: maybe,
  reading: z.enum(['agrees', 'slower', 'faster', 'undecided']).nullable(),
  decomposition: z.strictObject({ collisionS: number.nullable(), failedHitsS: number.nullable(), depletionS: maybe }),
})
export const OutcomeSchema = z.strictObject({
  format: z.literal('moorage-outcome'),
  version: z.literal(1),
  scenarioDigest: z.string(),
  engine: z.strictObject({ name: z.string(), version: z.string(), algorithm: z.enum(['stirred', 'attempt', 'touch', 'step']) }),
  seed: z.string(),
  replicates: z.number().int(),
  timesS: z.array(number),
  classes: z.array(OutcomeClassSchema),
  /** Variance between replicates of the filled sites of all classes together. */
  varFilledTotal: z.array(number),
  firstAttachment: z.strictObject({ stepS: number, histogram: z.array(number) }),
  tau: z.strictObject({
    valueS: number.nullable(), lowS: number.nullable(), highS: number.nullable(), t63S: number.nullable(),
    unfilledShare: number, method: z.string(),
  }),
  closedForm: z.strictObject({
    tauS: number.nullable(),
    components: z.array(z.strictObject({ name: z.string(), tauS: number.nullable(), share: number })),
    /** Filled sites of one ribbon by the closed form at timesS, [class][sample]. */
    filled: z.array(z.array(number)),
  }),
  ratio: maybe,
  agreement: z.strictObject({
    verdict: z.enum(['agrees', 'slower', 'faster', 'undecided']),
    marginPercent: number,
    /** Why, in a word that the page turns into a sentence. */
    reason: z.enum(['none', 'own-neighbourhood', 'finite-pool', 'exclusion', 'discrete-step', 'too-few']),
    /** Replicates in all that would probably decide; null when decided. */
    replicatesToDecide: number.nullable(),
    /** Test of exact equality under the discrete law (1−p)^n: standard normal statistic and two-sided p. */
    statistic: number.nullable(),
    pValue: number.nullable(),
  }),
  decomposition: z.strictObject({ collisionS: number.nullable(), failedHitsS: number.nullable(), depletionS: maybe }),
  landingErrorPerJump: number,
  blocks: z.array(z.strictObject({ from: z.number().int(), to: z.number().int(), digest: z.string() })),
  partial: z.boolean(),
  digest: z.string(),
})
export interface Interval { value: number, low: number, high: number }
export type Outcome = z.infer<typeof OutcomeSchema>
export type OutcomeClass = z.infer<typeof OutcomeClassSchema>
