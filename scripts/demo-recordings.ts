/** The recordings and weigh-ups of the demo bench, made from the invented file beside this one by the services that the server uses. */
import { readFileSync } from 'node:fs'
import { and, eq } from 'drizzle-orm'
import type { Database } from '../server/db/client'
import { recordings, weighUps } from '../server/db/schema'
import { createRecordings } from '../server/services/recording-create'
import type { Reader } from '../server/services/scenario-rows'
import { keepUpload } from '../server/services/uploads'
import { createWeighUp } from '../server/services/weigh-ups'
import { RecordingCreateSchema } from '../shared/schemas/api/recording'
import { WeighUpCreateSchema } from '../shared/schemas/api/weigh-up'

const FILE = 'cells.csv'
/** Conditions as the file names them, with what they are kept as. */
const KEPT = [
  { from: 'control', title: 'Control, 9 cells' }, { from: 'short', title: 'Short step, 9 cells' }, { from: 'AK-7', title: 'AK-7, 8 cells' }, { from: 'TP-4 peptide', title: 'TP-4 peptide, 8 cells' },
] as const
const DETAILS = { firstStimulus: 'depolarising step, 200 ms (25 ms in “short”)', solution: 'control solution, compound where named', animal: 'marl newt, stock MN-3; isolated bipolar terminal (all invented)', experimentalUnit: 'cell' } as const

/** @returns ids by name of the condition; recordings that are there already stay as they are */
async function seedRecordings(db: Database, as: Reader): Promise<Map<string, string>> {
  const bytes = readFileSync(new URL(`./demo-data/${FILE}`, import.meta.url))
  const known = async () => new Map((await db.select({ title: recordings.title, recordingId: recordings.recordingId }).from(recordings).where(and(eq(recordings.benchId, as.benchId), eq(recordings.createdBy, as.userId))))
    .flatMap(({ title, recordingId }) => KEPT.filter(one => one.title === title).map(one => [one.from as string, recordingId] as const)))
  const before = await known(), missing = KEPT.filter(one => !before.has(one.from))
  if (missing.length === 0) return before
  const { upload } = await keepUpload(db, as, FILE, bytes)
  const names = (from: string) => ({ condition: from, protocol: from === 'short' ? '25 ms step' : '200 ms step', manipulation: from === 'control' || from === 'short' ? 'none' : from })
  await createRecordings(db, as, RecordingCreateSchema.parse({
    uploadId: upload.uploadId, choices: {}, tags: ['invented'], notes: 'Invented data: drawn from two kinds of site with noise, nine draws tried so that control alone is a tie.',
    keep: missing.map(({ from, title }) => ({ from, title, ...names(from) })), details: DETAILS,
  }))
  return known()
}

const WEIGHED = [
  { title: 'Control alone', of: ['control'] }, { title: 'Control and short step', of: ['control', 'short'] }, { title: 'All four conditions', of: ['control', 'short', 'AK-7', 'TP-4 peptide'] },
] as const

export async function seedRecordingsAndWeighUps(db: Database, as: Reader): Promise<string> {
  const ids = await seedRecordings(db, as)
  for (const { title, of } of WEIGHED) {
    const [there] = await db.select({ weighUpId: weighUps.weighUpId }).from(weighUps).where(and(eq(weighUps.benchId, as.benchId), eq(weighUps.title, title))).limit(1)
    if (!there) await createWeighUp(db, as, WeighUpCreateSchema.parse({ title, recordings: of.map(name => ids.get(name)!) }))
  }
  return `${ids.size} recordings, ${WEIGHED.length} weigh-ups`
}
