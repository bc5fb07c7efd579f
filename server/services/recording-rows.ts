/** How recordings are read: rows of lists, the detail with its points. */
import { and, asc, desc, eq, isNull, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import { inBin } from '../db/bin'
import type { Handle } from '../db/client'
import { recordingPoints, recordings, uploads, users } from '../db/schema'
import { may, reachOf } from '../../shared/permissions'
import { meansOfCells } from '../../shared/recordings/conditions'
import type { ConditionData } from '../../shared/recordings/types'
import type { Page } from '../../shared/schemas/api/bench'
import type { RecordingDetail, RecordingListSchema, RecordingRow } from '../../shared/schemas/api/recording'
import { problem } from '../utils/problem'
import { cursorTime, readCursor, writeCursor } from './paging'
import type { Reader } from './scenario-rows'

const maker = alias(users, 'maker')
const editor = alias(users, 'editor')
const uploader = alias(users, 'uploader')
const counted = (what: SQL) => sql<number>`(select ${what} from recording_points where recording_points.recording_id = ${recordings.recordingId})`
const columns = {
  recordingId: recordings.recordingId, title: recordings.title, condition: recordings.condition, protocol: recordings.protocol, manipulation: recordings.manipulation,
  kind: recordings.kind, revision: recordings.revision, makerId: recordings.createdBy, createdBy: maker.name, updatedBy: editor.name,
  createdAt: recordings.createdAt, updatedAt: recordings.updatedAt, deletedAt: recordings.deletedAt, fileName: uploads.fileName,
  tags: sql<string[]>`(select coalesce(array_agg(recording_tags.tag order by recording_tags.tag), '{}') from recording_tags where recording_tags.recording_id = ${recordings.recordingId})`,
  points: counted(sql`count(distinct recording_points.interval_ms)::int`),
  cells: counted(sql`count(distinct recording_points.cell)::int`),
  aside: counted(sql`count(recording_points.aside)::int`),
}
const select = (db: Handle) => db.select(columns).from(recordings)
  .innerJoin(maker, eq(maker.userId, recordings.createdBy)).innerJoin(editor, eq(editor.userId, recordings.updatedBy))
  .innerJoin(uploads, eq(uploads.uploadId, recordings.uploadId)).$dynamic()
type Raw = Awaited<ReturnType<typeof select>>[number]

function asRow({ makerId, ...raw }: Raw, reader: Reader): RecordingRow {
  const item = { owns: makerId === reader.userId }
  return {
    ...raw, createdAt: raw.createdAt.toISOString(), updatedAt: raw.updatedAt.toISOString(), deletedAt: raw.deletedAt?.toISOString() ?? null,
    mayEdit: may(reader.role, 'recording.edit', item), mayDelete: may(reader.role, 'recording.delete', item),
  }
}

export async function listRecordings(db: Handle, reader: Reader, query: z.output<typeof RecordingListSchema>): Promise<Page<RecordingRow>> {
  if (reachOf(reader.role, 'recording.read') !== 'all') return { rows: [], nextCursor: null }
  const { search, tag, bin, limit } = query, from = readCursor(query.cursor)
  const found = await select(db).where(and(
    eq(recordings.benchId, reader.benchId),
    bin === '1' ? inBin(recordings.deletedAt) : isNull(recordings.deletedAt),
    search ? sql`position(lower(${search}) in lower(concat_ws(' ', ${recordings.title}, ${recordings.condition}, ${recordings.protocol}, ${recordings.manipulation}, ${uploads.fileName}))) > 0` : undefined,
    tag ? sql`exists (select 1 from recording_tags where recording_tags.recording_id = ${recordings.recordingId} and recording_tags.tag = ${tag})` : undefined,
    from ? sql`(${recordings.updatedAt}, ${recordings.recordingId}) < (${cursorTime(from.value).toISOString()}::timestamptz, ${from.id}::uuid)` : undefined,
  )).orderBy(desc(recordings.updatedAt), desc(recordings.recordingId)).limit(limit + 1)
  const rows = found.slice(0, limit).map(raw => asRow(raw, reader)), last = rows.at(-1)
  return { rows, nextCursor: found.length > limit && last ? writeCursor(last.updatedAt, last.recordingId) : null }
}

/** The data of a recording as fits take them, with the position of each row. */
export async function readConditionData(db: Handle, recordingId: string): Promise<{ data: ConditionData, positions: number[] }> {
  const [head] = await db.select({ condition: recordings.condition, protocol: recordings.protocol, manipulation: recordings.manipulation })
    .from(recordings).where(eq(recordings.recordingId, recordingId))
  if (!head) throw problem('not_found')
  const rows = await db.select().from(recordingPoints).where(eq(recordingPoints.recordingId, recordingId)).orderBy(asc(recordingPoints.intervalMs), asc(recordingPoints.position))
  const names = head, positions = rows.map(row => row.position)
  if (rows.every(row => row.cell === null)) return { positions, data: { ...names, cells: [], points: rows.map(({ intervalMs, ratio, sd, sem, n, aside, line }) => ({ intervalMs, ratio: ratio!, sd, sem, n, aside, line })) } }
  const cells = rows.map(({ cell, intervalMs, ratio, first, aside, line }) => ({ cell: cell!, intervalMs, ratio, first, aside, line }))
  return { positions, data: { ...names, cells, points: meansOfCells(cells) } }
}

export async function describeRecording(db: Handle, reader: Reader, recordingId: string): Promise<RecordingDetail> {
  const [raw] = await select(db).where(eq(recordings.recordingId, recordingId))
  const [rest] = await db.select({
    details: recordings.details, notes: recordings.notes, reading: recordings.reading,
    upload: { uploadId: uploads.uploadId, fileName: uploads.fileName, size: uploads.size, sha256: uploads.sha256, uploadedAt: uploads.uploadedAt, uploadedBy: uploader.name },
  }).from(recordings).innerJoin(uploads, eq(uploads.uploadId, recordings.uploadId)).innerJoin(uploader, eq(uploader.userId, uploads.uploadedBy))
    .where(eq(recordings.recordingId, recordingId))
  if (!raw || !rest) throw problem('not_found')
  return { ...asRow(raw, reader), benchId: reader.benchId, ...rest, upload: { ...rest.upload, uploadedAt: rest.upload.uploadedAt.toISOString() }, ...await readConditionData(db, recordingId) }
}
