/** Kept fits: made here from the recording's own points, written once. */
import { desc, eq } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { fits, recordings, users } from '../db/schema'
import { fitBySettings, fitDigest, type FitSettings, type KeptFit } from '../../shared/fitting/kept-fit'
import { badField } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { readConditionData } from './recording-rows'
import type { Reader } from './scenario-rows'

const select = (db: Handle) => db.select({
  fitId: fits.fitId, revision: fits.revision, settings: fits.settings, result: fits.result, digest: fits.digest, savedBy: users.name, savedAt: fits.savedAt,
}).from(fits).innerJoin(users, eq(users.userId, fits.savedBy)).$dynamic()
const asKept = (row: Awaited<ReturnType<typeof select>>[number]): KeptFit => ({ ...row, savedAt: row.savedAt.toISOString() } as unknown as KeptFit)

export async function listFits(db: Handle, recordingId: string): Promise<KeptFit[]> {
  return (await select(db).where(eq(fits.recordingId, recordingId)).orderBy(desc(fits.savedAt), desc(fits.fitId)).limit(50)).map(asKept)
}

/** Fits again and keeps what was found; refuses what cannot be fitted with the reason at the recording. */
export async function keepFit(db: Database, reader: Reader, recordingId: string, settings: FitSettings): Promise<KeptFit> {
  const { data } = await readConditionData(db, recordingId)
  const result = fitBySettings(data, settings)
  if ('refused' in result) throw badField('settings', result.refused.message)
  return db.transaction(async (tx) => {
    const [head] = await tx.select({ revision: recordings.revision }).from(recordings).where(eq(recordings.recordingId, recordingId))
    const [made] = await tx.insert(fits).values({
      recordingId, revision: head!.revision, settings: settings as unknown as Record<string, unknown>, result: result as unknown as Record<string, unknown>, digest: fitDigest(data, settings, result), savedBy: reader.userId,
    }).returning({ fitId: fits.fitId })
    await recordEvent(tx, { kind: 'fit-saved', actorId: reader.userId, benchId: reader.benchId, recordingId, revision: head!.revision })
    return asKept((await select(tx).where(eq(fits.fitId, made!.fitId)))[0]!)
  })
}
