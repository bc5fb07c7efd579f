/** The `moorage-weigh-up` document, version 1: what a weigh-up found. Every number is made from the recordings by `fitting/weighing`. */
import { z } from 'zod'
import { EXPLANATIONS } from '../fitting/weighing/explanations'

const number = z.number()
const maybe = z.number().nullable()
const text = z.string()
const explanation = z.enum(EXPLANATIONS)

/** What a weigh-up is asked; all of it can be left out. */
export const WeighSettingsSchema = z.strictObject({
  /** Weight means by the covariance of their cells wherever every condition has its cells. */
  cells: z.boolean().default(true),
  /** SD between cells, where it was pooled over a wider set than is weighed [1]. */
  pooledSd: number.positive().max(10).nullable().default(null),
  /** Depletions that are typed and not fitted, each with where the value comes from. */
  typedDepletion: z.array(z.strictObject({ protocol: text.min(1).max(120), value: number.min(0.05).max(1), source: text.min(1).max(300) })).max(40).default([]),
  /** Resampling of cells; 0 resamples: none. */
  resamples: number.int().min(0).max(9999).default(0),
  seed: text.max(200).default('weigh-up'),
})
export type WeighSettings = z.output<typeof WeighSettingsSchema>

const change = z.strictObject({
  manipulation: text,
  parameter: text,
  /** Value of the parameter without and with the manipulation, as `parameters` gives them: places in that list. */
  from: number.int().nullable(),
  to: number.int().nullable(),
})
const parameter = z.strictObject({
  name: text, label: text, unit: z.enum(['1', '1/s', 's']),
  manipulation: text.nullable(), protocol: text.nullable(),
  value: number, low: maybe, high: maybe,
  /** 1/value of a rate, with the ends of its interval [s]; null for what is no rate. */
  time: z.strictObject({ valueS: number, lowS: maybe, highS: maybe }).nullable(),
  method: z.enum(['profile', 'profile-cells', 'profile-assumed-cells', 'none']),
  atBound: z.enum(['lower', 'upper']).nullable(),
  unresolved: text.nullable(),
  /** Conditions in which it stands: places in `conditions`. */
  usedIn: z.array(number.int()),
})
export const WeighCandidateSchema = z.strictObject({
  explanation,
  name: text,
  changes: z.array(change),
  /** Best of its explanation; only these carry intervals, curves and residuals. */
  best: z.boolean(),
  chi2: number, dof: number.int(), free: number.int(),
  pValue: maybe, acceptable: z.boolean(),
  criterion: number, behind: number, weight: number,
  reading: z.enum(['preferred', 'within', 'behind', 'excluded', 'other-change']),
  parameters: z.array(parameter),
  /** By places in `parameters`; in the scale of the fit (logarithms of rates). */
  correlations: z.array(z.strictObject({ first: number.int(), second: number.int(), value: number })),
  /** One per condition, at its `gridS` [1]. */
  curves: z.array(z.array(number)),
  /** One per condition and point: (measured − fitted) over its standard error [1]. */
  residuals: z.array(z.array(number)),
})
const condition = z.strictObject({
  condition: text, protocol: text, manipulation: text,
  points: z.array(z.strictObject({ timeS: number, ratio: number, error: maybe, sd: maybe, n: maybe })),
  /** Points that stay out of the fit [count]. */
  aside: number.int(),
  /** Times of the curves [s]. */
  gridS: z.array(number),
})
const noise = z.strictObject({
  kind: z.enum(['pooled', 'mixed', 'sem', 'scatter', 'cells']), pooledSd: maybe,
  cells: z.strictObject({ sigma: number, kappa: number, delta: number, dof: number.int() }).nullable(),
  sentence: text,
})
const verdict = z.strictObject({
  kind: z.enum(['prefers', 'cannot-tell']),
  rule: z.enum(['suffices', 'ahead', 'tied', 'none-acceptable', 'cells-differ']),
  explanation: explanation.nullable(),
  changes: z.array(z.strictObject({ manipulation: text, parameter: text, named: z.boolean(), alternatives: z.array(z.strictObject({ parameter: text, behind: number })) })),
  margin: number, needed: number,
  within: z.array(explanation),
  /** max(1, χ²/dof) of the best fit [1]. */
  scale: number,
  sentence: text,
  /** One sentence for each manipulation under the preferred explanation. */
  changeSentences: z.array(text),
})
const settles = z.strictObject({
  what: z.enum(['short-step', 'manipulation']),
  /** Of the manipulation: what it would have to change, under which explanation. */
  changes: z.strictObject({ explanation, parameter: text, factor: number }).nullable(),
  pairs: z.array(z.strictObject({ truth: explanation, rival: explanation, gain: number })),
  least: number, separates: z.boolean(), sentence: text,
})
const resample = z.strictObject({
  asked: number.int(), done: number.int(), seed: text, partial: z.boolean(),
  /** Resamples whose best by the criterion is the same explanation, and with the same changes [count]. */
  sameExplanation: number.int(), sameChanges: number.int(),
  best: z.array(z.strictObject({ explanation, count: number.int() })),
  /** Of the same parameters as the leading candidate's: SD over resamples × √(n/(n − 1)) × t, as a cross-check of the intervals. */
  parameters: z.array(z.strictObject({ low: number, high: number }).nullable()),
  sentence: text,
})
export const WeighUpSchema = z.strictObject({
  format: z.literal('moorage-weigh-up'),
  version: z.literal(1),
  /** Version of the program that weighed. */
  engineVersion: text,
  settings: WeighSettingsSchema,
  conditions: z.array(condition),
  untouched: text,
  noise,
  /** `chi2`: errors known. `aicc`: told by the scatter. */
  criterion: z.enum(['chi2', 'aicc']),
  candidates: z.array(WeighCandidateSchema),
  /** Explanations that were not fitted, with the reason. */
  left: z.array(z.strictObject({ explanation, reason: text })),
  spread: z.strictObject({ q: number, reading: z.enum(['inside-cells', 'open', 'between-cells']), sentence: text }).nullable(),
  verdict,
  doubts: z.array(z.strictObject({ code: text, sentence: text })),
  settle: z.array(settles),
  resample: resample.nullable(),
  notes: z.array(text),
  digest: text.regex(/^[0-9a-f]{64}$/),
})
export type WeighUp = z.infer<typeof WeighUpSchema>
export type WeighCandidate = z.infer<typeof WeighCandidateSchema>
export type WeighUpParameter = z.infer<typeof parameter>
export type WeighVerdict = z.infer<typeof verdict>
export type WeighSettle = z.infer<typeof settles>
export type WeighResample = z.infer<typeof resample>

const judged = { kind: z.enum(['prefers', 'cannot-tell']), explanation: explanation.nullable(), within: z.array(explanation), margin: number, changesNamed: z.boolean(), same: z.boolean() }
/** The verdict under other assumptions. */
export const WeighSensitivitySchema = z.strictObject({
  depletions: z.array(z.strictObject({ protocol: text, value: number, acceptable: z.boolean(), ...judged })),
  uneven: z.strictObject({ judged: z.strictObject(judged).nullable(), sentence: text }),
  sentence: text,
  rescale: text,
})
export type WeighSensitivity = z.infer<typeof WeighSensitivitySchema>

/** How the verdict grew with the data: `conditions` are places in those of the weigh-up. */
export const WeighGrowthSchema = z.array(z.strictObject({
  conditions: z.array(z.number().int()), kind: z.enum(['prefers', 'cannot-tell']), explanation: explanation.nullable(), within: z.array(explanation),
  chi2: z.array(z.strictObject({ explanation, chi2: number, dof: z.number().int() })),
}))
export type WeighGrowth = z.infer<typeof WeighGrowthSchema>
