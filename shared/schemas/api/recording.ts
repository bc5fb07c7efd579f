/** Bodies of recordings: files, what was read from them, points set aside, kept readings. */
import { z } from 'zod'
import type { ConditionData } from '../../recordings/types'
import { ConditionNamesSchema, RecordingDetailsSchema, RECORDING_LIMITS, type RecordingDetails, type RecordingReading } from '../recording'
import { neutraliseText } from '../text'
import { TagSchema } from './scenario'

/** POST /api/benches/:benchId/uploads?name=… with the bytes as application/octet-stream → Upload (201; 200 when the same file was kept before) */
export const UploadQuerySchema = z.strictObject({
  name: z.string().transform(neutraliseText).pipe(z.string().min(1, 'The file\'s name is wanted.').max(255, 'At most 255 characters.')),
})
export interface Upload {
  uploadId: string, fileName: string, size: number, sha256: string
  /** Recordings made from the very same bytes on this bench. */
  already: { recordingId: string, title: string, keptAt: string, by: string }[]
}

/** POST /api/benches/:benchId/recordings → RecordingDetail[] (201). The server reads the file again by these choices; points are never taken from the client. */
export const RecordingCreateSchema = z.strictObject({
  uploadId: z.uuid(),
  /** ReadingChoices, judged by the reader. */
  choices: z.record(z.string(), z.unknown()),
  /** One for each condition to keep; `from` names it as the file does. */
  keep: z.array(ConditionNamesSchema.extend({ from: z.string().max(RECORDING_LIMITS.nameLength) })).min(1, 'Nothing to keep was chosen.').max(50),
  details: RecordingDetailsSchema.default(() => RecordingDetailsSchema.parse({})),
  tags: z.array(TagSchema).max(20).default([]),
  notes: z.string().max(RECORDING_LIMITS.notesLength).default(''),
  /** Offer this reading for the next file of the same shape. */
  keepMapping: z.boolean().default(false),
})

/** PUT /api/recordings/:recordingId, If-Match: "<revision>" → RecordingDetail: names, details, notes, tags */
export const RecordingEditSchema = z.strictObject({
  ...ConditionNamesSchema.shape, details: RecordingDetailsSchema, notes: z.string().max(RECORDING_LIMITS.notesLength), tags: z.array(TagSchema).max(20),
})
/** PATCH /api/recordings/:recordingId, If-Match → RecordingDetail: points set aside with a reason, or taken back with null */
export const PointsAsideSchema = z.strictObject({
  points: z.array(z.strictObject({
    position: z.number().int().nonnegative(),
    aside: z.string().transform(neutraliseText).pipe(z.string().min(1, 'A reason is wanted.').max(200, 'At most 200 characters.')).nullable(),
  })).min(1).max(RECORDING_LIMITS.points),
})
/** GET /api/benches/:benchId/recordings?search=&tag=&bin=0|1&cursor=&limit= → Page<RecordingRow> */
export const RecordingListSchema = z.strictObject({
  search: z.string().max(200).default(''), tag: z.string().max(40).default(''),
  bin: z.enum(['0', '1']).default('0'), cursor: z.string().max(500).default(''), limit: z.coerce.number().int().min(1).max(100).default(25),
})
/** GET /api/benches/:benchId/mappings?shape=… → { mapping: KeptMapping | null } */
export const MappingQuerySchema = z.strictObject({ shape: z.string().regex(/^[0-9a-f]{64}$/, 'A shape is 64 hexadecimal digits.') })
export interface KeptMapping { choices: Record<string, unknown>, savedBy: string, savedAt: string }

export interface RecordingRow {
  recordingId: string, title: string, condition: string, protocol: string, manipulation: string, kind: 'summary' | 'cells' | 'trace'
  revision: number, tags: string[], points: number, cells: number, aside: number, fileName: string
  createdBy: string, updatedBy: string, createdAt: string, updatedAt: string, deletedAt: string | null, mayEdit: boolean, mayDelete: boolean
}
/** GET /api/recordings/:recordingId (ETag "<revision>") · DELETE (bin) · POST …/restore · GET …/original (the bytes) */
export interface RecordingDetail extends RecordingRow {
  benchId: string
  details: RecordingDetails
  notes: string
  reading: RecordingReading
  upload: { uploadId: string, fileName: string, size: number, sha256: string, uploadedAt: string, uploadedBy: string }
  data: ConditionData
  /** Positions of the rows behind `data`: of `data.cells` where cells are given, else of `data.points`. */
  positions: number[]
}
