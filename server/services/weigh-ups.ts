/** Weigh-ups: made here from the bench's recordings, each version written once with the data it was made from. */
import { and, desc, eq, inArray, isNull, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import { inBin } from '../db/bin'
import type { Database, Handle } from '../db/client'
import { benches, recordings, users, weighUps, weighUpVersions } from '../db/schema'
import { weighUp } from '../../shared/fitting/weighing/weigh-up'
import { may, reachOf } from '../../shared/permissions'
import type { ConditionData } from '../../shared/recordings/types'
import type { Page } from '../../shared/schemas/api/bench'
import type { WeighAgainSchema, WeighUpCreateSchema, WeighUpDetail, WeighUpListSchema, WeighUpRow } from '../../shared/schemas/api/weigh-up'
import type { WeighSettings, WeighUp } from '../../shared/schemas/weigh-up'
import { badField, problem } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { binItem, unbinItem } from './item-bin'
import { cursorTime, readCursor, writeCursor } from './paging'
import { readConditionData } from './recording-rows'
import type { Reader } from './scenario-rows'

const maker = alias(users, 'maker')
const editor = alias(users, 'editor')
const saver = alias(users, 'saver')
const columns = {
  weighUpId: weighUps.weighUpId, number: weighUps.number, title: weighUps.title, version: weighUps.version, makerId: weighUps.createdBy,
  createdBy: maker.name, updatedBy: editor.name, createdAt: weighUps.createdAt, updatedAt: weighUps.updatedAt, deletedAt: weighUps.deletedAt,
  conditions: sql<{ condition: string }[]>`${weighUpVersions.result}->'conditions'`, verdict: sql<WeighUpRow['verdict']>`${weighUpVersions.result}->'verdict'`,
}
const select = (db: Handle) => db.select(columns).from(weighUps)
  .innerJoin(maker, eq(maker.userId, weighUps.createdBy)).innerJoin(editor, eq(editor.userId, weighUps.updatedBy))
  .innerJoin(weighUpVersions, and(eq(weighUpVersions.weighUpId, weighUps.weighUpId), eq(weighUpVersions.version, weighUps.version))).$dynamic()

function asRow({ makerId, conditions, verdict, ...raw }: Awaited<ReturnType<typeof select>>[number], reader: Reader): WeighUpRow {
  const item = { owns: makerId === reader.userId }, { kind, explanation, within, margin, rule } = verdict
  return {
    ...raw, conditions: conditions.map(one => one.condition), verdict: { kind, explanation, within, margin, rule },
    createdAt: raw.createdAt.toISOString(), updatedAt: raw.updatedAt.toISOString(), deletedAt: raw.deletedAt?.toISOString() ?? null,
    mayEdit: may(reader.role, 'weigh-up.edit', item), mayDelete: may(reader.role, 'weigh-up.delete', item),
  }
}

export async function listWeighUps(db: Handle, reader: Reader, { bin, cursor, limit }: z.output<typeof WeighUpListSchema>): Promise<Page<WeighUpRow>> {
  if (reachOf(reader.role, 'weigh-up.read') !== 'all') return { rows: [], nextCursor: null }
  const from = readCursor(cursor)
  const found = await select(db).where(and(
    eq(weighUps.benchId, reader.benchId), bin === '1' ? inBin(weighUps.deletedAt) : isNull(weighUps.deletedAt),
    from ? sql`(${weighUps.updatedAt}, ${weighUps.weighUpId}) < (${cursorTime(from.value).toISOString()}::timestamptz, ${from.id}::uuid)` : undefined,
  )).orderBy(desc(weighUps.updatedAt), desc(weighUps.weighUpId)).limit(limit + 1)
  const rows = found.slice(0, limit).map(raw => asRow(raw, reader)), last = rows.at(-1)
  return { rows, nextCursor: found.length > limit && last ? writeCursor(last.updatedAt, last.weighUpId) : null }
}

/** A version with what it was made from; the newest where none is named. */
export async function describeWeighUp(db: Handle, reader: Reader, weighUpId: string, version?: number): Promise<WeighUpDetail> {
  const [raw] = await select(db).where(eq(weighUps.weighUpId, weighUpId))
  if (!raw) throw problem('not_found')
  const [kept] = await db.select({ shown: weighUpVersions.version, inputs: weighUpVersions.inputs, data: weighUpVersions.data, settings: weighUpVersions.settings, result: weighUpVersions.result, digest: weighUpVersions.digest, savedBy: saver.name, savedAt: weighUpVersions.savedAt })
    .from(weighUpVersions).innerJoin(saver, eq(saver.userId, weighUpVersions.savedBy)).where(and(eq(weighUpVersions.weighUpId, weighUpId), eq(weighUpVersions.version, version ?? raw.version)))
  if (!kept) throw problem('not_found')
  const now = await db.select({ recordingId: recordings.recordingId, title: recordings.title, now: recordings.revision }).from(recordings).where(inArray(recordings.recordingId, kept.inputs.map(one => one.recordingId)))
  return {
    ...asRow(raw, reader), benchId: reader.benchId, ...kept, settings: kept.settings as unknown as WeighSettings, result: kept.result as unknown as WeighUp, savedAt: kept.savedAt.toISOString(),
    inputs: kept.inputs.map(one => ({ ...one, title: '', now: 0, ...now.find(other => other.recordingId === one.recordingId) })),
  }
}

interface Weighed { inputs: { recordingId: string, revision: number }[], data: ConditionData[], settings: WeighSettings, result: WeighUp }

/** Reads the recordings as they stand and weighs. */
async function weigh(db: Handle, reader: Reader, ids: readonly string[], settings: WeighSettings): Promise<Weighed> {
  const heads = await db.select({ recordingId: recordings.recordingId, revision: recordings.revision }).from(recordings)
    .where(and(eq(recordings.benchId, reader.benchId), inArray(recordings.recordingId, [...ids]), isNull(recordings.deletedAt)))
  const data: ConditionData[] = [], inputs: Weighed['inputs'] = []
  for (const [i, recordingId] of ids.entries()) {
    const head = heads.find(one => one.recordingId === recordingId)
    if (!head) throw badField(`recordings.${i}`, 'This bench has no such recording.')
    inputs.push(head)
    data.push((await readConditionData(db, recordingId)).data)
  }
  const result = weighUp({ conditions: data, settings })
  if (!result || 'refused' in result) throw badField('recordings', result?.refused.message ?? 'The weigh-up was stopped.')
  return { inputs, data, settings, result }
}

async function insertVersion(tx: Handle, reader: Reader, weighUpId: string, version: number, { inputs, data, settings, result }: Weighed) {
  await tx.insert(weighUpVersions).values({
    weighUpId, version, inputs, data, settings: settings as unknown as Record<string, unknown>, result: result as unknown as Record<string, unknown>, digest: result.digest, savedBy: reader.userId,
  })
  await recordEvent(tx, { kind: 'weigh-up-saved', actorId: reader.userId, benchId: reader.benchId, weighUpId, revision: version })
}

export async function createWeighUp(db: Database, reader: Reader, { title, recordings: ids, settings }: z.output<typeof WeighUpCreateSchema>): Promise<WeighUpDetail> {
  const weighed = await weigh(db, reader, ids, settings)
  const weighUpId = await db.transaction(async (tx) => {
    const [bench] = await tx.update(benches).set({ weighUpsNumbered: sql`${benches.weighUpsNumbered} + 1` }).where(eq(benches.benchId, reader.benchId)).returning({ number: benches.weighUpsNumbered })
    const [made] = await tx.insert(weighUps).values({ benchId: reader.benchId, number: bench!.number, title, version: 1, createdBy: reader.userId, updatedBy: reader.userId }).returning({ weighUpId: weighUps.weighUpId })
    await insertVersion(tx, reader, made!.weighUpId, 1, weighed)
    return made!.weighUpId
  })
  return describeWeighUp(db, reader, weighUpId)
}

/** Weighs again from the recordings as they stand now; a new version even where the numbers stay, so that it can be told when it was looked at. */
export async function weighAgain(db: Database, reader: Reader, weighUpId: string, change: z.output<typeof WeighAgainSchema>): Promise<WeighUpDetail> {
  const before = await describeWeighUp(db, reader, weighUpId)
  const weighed = await weigh(db, reader, change.recordings ?? before.inputs.map(one => one.recordingId), change.settings ?? before.settings)
  await db.transaction(async (tx) => {
    const [head] = await tx.update(weighUps).set({ version: sql`${weighUps.version} + 1`, updatedBy: reader.userId, updatedAt: sql`now()` }).where(and(eq(weighUps.weighUpId, weighUpId), isNull(weighUps.deletedAt))).returning({ version: weighUps.version })
    if (!head) throw problem('not_found')
    await insertVersion(tx, reader, weighUpId, head.version, weighed)
  })
  return describeWeighUp(db, reader, weighUpId)
}

export const binWeighUp = (db: Database, reader: Reader, weighUpId: string) => db.transaction(tx => binItem(tx, reader, 'weigh-up', weighUpId))
export const unbinWeighUp = (db: Database, reader: Reader, weighUpId: string) => db.transaction(async (tx) => {
  await unbinItem(tx, reader, 'weigh-up', weighUpId)
  return describeWeighUp(tx, reader, weighUpId)
})
