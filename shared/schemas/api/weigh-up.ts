/** Bodies of weigh-ups. The server weighs again from the bench's own recordings; nothing of the result comes from the client. */
import { z } from 'zod'
import type { ConditionData } from '../../recordings/types'
import { neutraliseText } from '../text'
import { WeighSettingsSchema, type WeighSettings, type WeighUp, type WeighVerdict } from '../weigh-up'

/** Conditions that are weighed together at most [count]. */
export const WEIGHED_TOGETHER = 12
/** Kept settings: resampling is made on the page, for information. */
export const KeptWeighSettingsSchema = WeighSettingsSchema.extend({ resamples: z.literal(0).default(0) })
const recordings = z.array(z.uuid()).min(1, 'Choose at least one recording.').max(WEIGHED_TOGETHER, `At most ${WEIGHED_TOGETHER} recordings are weighed together.`)
  .refine(ids => new Set(ids).size === ids.length, 'A recording is named twice.')

/** POST /api/benches/:benchId/weigh-ups → WeighUpDetail (201) */
export const WeighUpCreateSchema = z.strictObject({
  title: z.string().transform(neutraliseText).pipe(z.string().min(1, 'A title is wanted.').max(200, 'At most 200 characters.')),
  recordings, settings: KeptWeighSettingsSchema.default(() => KeptWeighSettingsSchema.parse({})),
})
/** POST /api/weigh-ups/:weighUpId/versions → WeighUpDetail (201): weighed again from the recordings as they stand now. */
export const WeighAgainSchema = z.strictObject({ recordings: recordings.optional(), settings: KeptWeighSettingsSchema.optional() })
/** GET /api/benches/:benchId/weigh-ups?bin=&cursor=&limit= → Page<WeighUpRow> */
export const WeighUpListSchema = z.strictObject({
  bin: z.enum(['0', '1']).default('0'), cursor: z.string().max(500).default(''), limit: z.coerce.number().int().min(1).max(100).default(25),
})
export interface WeighUpRow {
  weighUpId: string, number: number, title: string, version: number, conditions: string[]
  verdict: Pick<WeighVerdict, 'kind' | 'explanation' | 'within' | 'margin' | 'rule'>
  createdBy: string, updatedBy: string, createdAt: string, updatedAt: string, deletedAt: string | null, mayEdit: boolean, mayDelete: boolean
}
/** GET /api/weigh-ups/:weighUpId · GET …/versions/:revision · DELETE · POST …/restore */
export interface WeighUpDetail extends WeighUpRow {
  benchId: string
  /** Version that is shown; `version` is the newest. */
  shown: number
  inputs: { recordingId: string, revision: number, title: string, now: number }[]
  data: ConditionData[]
  settings: WeighSettings
  result: WeighUp
  digest: string
  savedBy: string
  savedAt: string
}
