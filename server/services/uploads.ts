/** Files as they came: kept once for a bench, found again by their hash. */
import { createHash } from 'node:crypto'
import { and, asc, eq, isNull } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { recordings, uploads, users } from '../db/schema'
import type { Upload } from '../../shared/schemas/api/recording'
import { badField } from '../utils/problem'
import type { Reader } from './scenario-rows'

const head = { uploadId: uploads.uploadId, fileName: uploads.fileName, size: uploads.size, sha256: uploads.sha256 }

/** The same bytes under the same name are kept once. */
export async function keepUpload(db: Database, reader: Reader, fileName: string, bytes: Buffer): Promise<{ upload: Upload, fresh: boolean }> {
  const sha256 = createHash('sha256').update(bytes).digest('hex')
  const already = await recordingsOf(db, reader.benchId, sha256)
  const [known] = await db.select(head).from(uploads).where(and(eq(uploads.benchId, reader.benchId), eq(uploads.sha256, sha256), eq(uploads.fileName, fileName))).limit(1)
  if (known) return { upload: { ...known, already }, fresh: false }
  const [made] = await db.insert(uploads).values({ benchId: reader.benchId, fileName, size: bytes.length, sha256, bytes, uploadedBy: reader.userId }).returning(head)
  return { upload: { ...made!, already }, fresh: true }
}

async function recordingsOf(db: Handle, benchId: string, sha256: string): Promise<Upload['already']> {
  const rows = await db.select({ recordingId: recordings.recordingId, title: recordings.title, keptAt: recordings.createdAt, by: users.name }).from(recordings)
    .innerJoin(uploads, eq(uploads.uploadId, recordings.uploadId)).innerJoin(users, eq(users.userId, recordings.createdBy))
    .where(and(eq(uploads.benchId, benchId), eq(uploads.sha256, sha256), isNull(recordings.deletedAt))).orderBy(asc(recordings.createdAt)).limit(20)
  return rows.map(row => ({ ...row, keptAt: row.keptAt.toISOString() }))
}

/** The bytes of a file of this bench. */
export async function readUpload(db: Handle, benchId: string, uploadId: string): Promise<{ fileName: string, bytes: Buffer }> {
  const [found] = await db.select({ fileName: uploads.fileName, bytes: uploads.bytes }).from(uploads).where(and(eq(uploads.uploadId, uploadId), eq(uploads.benchId, benchId)))
  if (!found) throw badField('uploadId', 'This bench has no such file.')
  return found
}
/** The file behind a recording. */
export async function readOriginal(db: Handle, recordingId: string): Promise<{ fileName: string, bytes: Buffer, sha256: string }> {
  const [found] = await db.select({ fileName: uploads.fileName, bytes: uploads.bytes, sha256: uploads.sha256 }).from(uploads)
    .innerJoin(recordings, eq(recordings.uploadId, uploads.uploadId)).where(eq(recordings.recordingId, recordingId))
  return found!
}
