/** Changing recordings: names and details, points set aside, the bin. Nobody's edit is overwritten. */
import { and, eq, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Database, Handle } from '../db/client'
import { recordingPoints, recordings, recordingTags, users } from '../db/schema'
import type { PointsAsideSchema, RecordingDetail, RecordingEditSchema } from '../../shared/schemas/api/recording'
import type { StaleEdit } from '../../shared/schemas/api/scenario'
import { badField, problem } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { binItem, unbinItem } from './item-bin'
import { describeRecording } from './recording-rows'
import type { Reader } from './scenario-rows'

/** Locks the head and refuses an edit that was not made from it: 412 with who saved and when. */
async function lockHead(tx: Handle, recordingId: string, revision: number): Promise<void> {
  const [head] = await tx.select({ revision: recordings.revision, deletedAt: recordings.deletedAt, updatedAt: recordings.updatedAt, author: users.name })
    .from(recordings).innerJoin(users, eq(users.userId, recordings.updatedBy)).where(eq(recordings.recordingId, recordingId)).for('update', { of: recordings })
  if (!head || head.deletedAt) throw problem('not_found')
  if (head.revision === revision) return
  const current: StaleEdit = { revision: head.revision, author: head.author, savedAt: head.updatedAt.toISOString() }
  throw problem('moved_on', { current, detail: `${current.author} changed this recording in the meantime.` })
}

export async function replaceRecordingTags(tx: Handle, recordingId: string, wanted: string[]): Promise<void> {
  await tx.delete(recordingTags).where(eq(recordingTags.recordingId, recordingId))
  const unique = [...new Set(wanted)]
  if (unique.length) await tx.insert(recordingTags).values(unique.map(tag => ({ recordingId, tag })))
}

async function moveOn(tx: Handle, reader: Reader, recordingId: string, from: number, note: string, change: Partial<typeof recordings.$inferInsert> = {}): Promise<RecordingDetail> {
  await tx.update(recordings).set({ ...change, revision: from + 1, updatedBy: reader.userId, updatedAt: sql`now()` as unknown as Date }).where(eq(recordings.recordingId, recordingId))
  await recordEvent(tx, { kind: 'recording-changed', actorId: reader.userId, benchId: reader.benchId, recordingId, revision: from + 1, note })
  return describeRecording(tx, reader, recordingId)
}

export async function editRecording(db: Database, reader: Reader, recordingId: string, from: number, { tags, ...edit }: z.output<typeof RecordingEditSchema>): Promise<RecordingDetail> {
  return db.transaction(async (tx) => {
    await lockHead(tx, recordingId, from)
    await replaceRecordingTags(tx, recordingId, tags)
    return moveOn(tx, reader, recordingId, from, 'names and details', edit)
  })
}

export async function setPointsAside(db: Database, reader: Reader, recordingId: string, from: number, { points }: z.output<typeof PointsAsideSchema>): Promise<RecordingDetail> {
  return db.transaction(async (tx) => {
    await lockHead(tx, recordingId, from)
    for (const [i, { position, aside }] of points.entries()) {
      const done = await tx.update(recordingPoints).set({ aside }).where(and(eq(recordingPoints.recordingId, recordingId), eq(recordingPoints.position, position))).returning({ position: recordingPoints.position })
      if (!done.length) throw badField(`points.${i}.position`, `This recording has no row ${position}.`)
    }
    return moveOn(tx, reader, recordingId, from, `${points.length} ${points.length === 1 ? 'row' : 'rows'} set aside or taken back`)
  })
}

export const binRecording = (db: Database, reader: Reader, recordingId: string) => db.transaction(tx => binItem(tx, reader, 'recording', recordingId))
export const unbinRecording = (db: Database, reader: Reader, recordingId: string) => db.transaction(async (tx) => {
  await unbinItem(tx, reader, 'recording', recordingId)
  return describeRecording(tx, reader, recordingId)
})
