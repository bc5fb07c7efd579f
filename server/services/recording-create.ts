/** Recordings made from a kept file: the server reads the bytes again by the person's choices; no point ever comes from a client. */
import { and, eq } from 'drizzle-orm'
import type { z } from 'zod'
import type { Database, Handle } from '../db/client'
import { mappings, recordingPoints, recordings, users } from '../db/schema'
import { parseChoices, type ReadingChoices } from '../../shared/recordings/choices'
import { mappingOf } from '../../shared/recordings/mapping'
import { readBytes, readingRecord } from '../../shared/recordings/read'
import type { Reading } from '../../shared/recordings/reading'
import type { ConditionData } from '../../shared/recordings/types'
import type { KeptMapping, RecordingCreateSchema, RecordingDetail } from '../../shared/schemas/api/recording'
import { badField, problem } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { replaceRecordingTags } from './recording-edits'
import { describeRecording } from './recording-rows'
import type { Reader } from './scenario-rows'
import { readUpload } from './uploads'

type Wanted = z.output<typeof RecordingCreateSchema>

/** A statement takes 65,535 parameters at most; a row has eleven. */
const ROWS_A_STATEMENT = 4000

function readAgain(bytes: Buffer, given: Record<string, unknown>): { reading: Reading, choices: ReadingChoices } {
  const judged = parseChoices(given)
  if (!judged.ok) throw problem('bad_input', { errors: judged.problems })
  const read = readBytes(new Uint8Array(bytes.buffer, bytes.byteOffset, bytes.length), judged.choices)
  if (!read.ok) throw problem('bad_input', { errors: [read.problem] })
  const { reading } = read
  if (reading.problems.length) throw problem('bad_input', { errors: reading.problems })
  const open = reading.questions.filter(question => question.must)
  if (open.length) throw problem('bad_input', { errors: open.map(question => ({ path: `choices.${question.id}`, message: question.sentence })) })
  return { reading, choices: judged.choices }
}

type PointRow = typeof recordingPoints.$inferInsert
function rowsOf(recordingId: string, data: ConditionData): PointRow[] {
  if (data.cells.length > 0) return data.cells.map((one, position) => ({ recordingId, position, ...one }))
  return data.points.map((one, position) => ({ recordingId, position, ...one }))
}

async function insertOne(tx: Handle, reader: Reader, wanted: Wanted, keep: Wanted['keep'][number], data: ConditionData, read: { reading: Reading, choices: ReadingChoices }, at: Date): Promise<string> {
  const { from: _from, ...names } = keep
  const [made] = await tx.insert(recordings).values({
    benchId: reader.benchId, uploadId: wanted.uploadId, ...names, kind: read.reading.kind, reading: readingRecord(read.reading, read.choices),
    details: wanted.details, notes: wanted.notes, createdBy: reader.userId, updatedBy: reader.userId, createdAt: at, updatedAt: at,
  }).returning({ recordingId: recordings.recordingId })
  const { recordingId } = made!, rows = rowsOf(recordingId, data)
  for (let i = 0; i < rows.length; i += ROWS_A_STATEMENT) await tx.insert(recordingPoints).values(rows.slice(i, i + ROWS_A_STATEMENT))
  await replaceRecordingTags(tx, recordingId, wanted.tags)
  await recordEvent(tx, { kind: 'recording-kept', actorId: reader.userId, benchId: reader.benchId, recordingId, revision: 1, at })
  return recordingId
}

export async function createRecordings(db: Database, reader: Reader, wanted: Wanted, at = new Date()): Promise<RecordingDetail[]> {
  const { bytes } = await readUpload(db, reader.benchId, wanted.uploadId)
  const read = readAgain(bytes, wanted.choices)
  const chosen = wanted.keep.map((keep, i) => {
    const data = read.reading.conditions.find(one => one.condition === keep.from)
    if (!data) throw badField(`keep.${i}.from`, `This file has no condition “${keep.from}”.`)
    return { keep, data }
  })
  const ids = await db.transaction(async (tx) => {
    const made: string[] = []
    for (const { keep, data } of chosen) made.push(await insertOne(tx, reader, wanted, keep, data, read, at))
    if (wanted.keepMapping) await keepMapping(tx, reader, read.reading.shape, mappingOf(read.reading, read.choices), at)
    return made
  })
  return Promise.all(ids.map(id => describeRecording(db, reader, id)))
}

async function keepMapping(tx: Handle, reader: Reader, shape: string, choices: ReadingChoices, at: Date): Promise<void> {
  const row = { choices: choices as Record<string, unknown>, savedBy: reader.userId, savedAt: at }
  await tx.insert(mappings).values({ benchId: reader.benchId, shape, ...row }).onConflictDoUpdate({ target: [mappings.benchId, mappings.shape], set: row })
}
/** How a file of this shape was read last on this bench; null where none was kept. */
export async function findMapping(db: Handle, benchId: string, shape: string): Promise<KeptMapping | null> {
  const [found] = await db.select({ choices: mappings.choices, savedBy: users.name, savedAt: mappings.savedAt })
    .from(mappings).innerJoin(users, eq(users.userId, mappings.savedBy)).where(and(eq(mappings.benchId, benchId), eq(mappings.shape, shape)))
  return found ? { ...found, savedAt: found.savedAt.toISOString() } : null
}
