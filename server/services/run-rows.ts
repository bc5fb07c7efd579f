/** How runs are read: rows of lists, the detail with its outcome, the blocks behind it. */
import { and, asc, desc, eq, isNull, lt, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { inBin } from '../db/bin'
import type { Handle } from '../db/client'
import { runBlocks, runs, scenarioRevisions, scenarios, users } from '../db/schema'
import { may, reachOf } from '../../shared/permissions'
import type { Page } from '../../shared/schemas/api/bench'
import type { RunDetail, RunListSchema, RunRow } from '../../shared/schemas/api/run'
import type { ReplicateBlock } from '../../shared/walk/types'
import { badField, problem } from '../utils/problem'
import { readCursor, writeCursor } from './paging'
import type { Reader } from './scenario-rows'

const columns = {
  runId: runs.runId, benchId: runs.benchId, number: runs.number, scenarioId: runs.scenarioId, title: scenarios.title, revision: runs.revision, seed: runs.seed, replicates: runs.replicates, partial: runs.partial,
  algorithm: runs.algorithm, engineVersion: runs.engineVersion, savedBy: users.name, saverId: runs.savedBy, savedAt: runs.savedAt, deletedAt: runs.deletedAt, summary: runs.summary,
  auditState: runs.auditState, auditBlocks: runs.auditBlocks, auditDetection: runs.auditDetection, auditAt: runs.auditAt,
  blocks: runs.blocks,
}
const select = (db: Handle) => db.select(columns).from(runs)
  .innerJoin(scenarios, eq(scenarios.scenarioId, runs.scenarioId)).innerJoin(users, eq(users.userId, runs.savedBy)).$dynamic()
type Raw = Awaited<ReturnType<typeof select>>[number]

function asRow(raw: Raw, reader: Reader): RunRow {
  const { saverId, summary, benchId: _bench, auditState, auditBlocks, auditDetection, auditAt, blocks, savedAt, deletedAt, ...plain } = raw
  return {
    ...plain, savedAt: savedAt.toISOString(), deletedAt: deletedAt?.toISOString() ?? null, verdict: summary.verdict, ratio: summary.ratio,
    audit: { state: auditState, blocksRedrawn: auditBlocks, blocks, detection: auditDetection, at: auditAt?.toISOString() ?? null },
    mayDelete: may(reader.role, 'run.delete', { owns: saverId === reader.userId }),
  }
}

export async function listRuns(db: Handle, reader: Reader, query: z.output<typeof RunListSchema>, scenarioId?: string): Promise<Page<RunRow>> {
  if (reachOf(reader.role, 'run.read') !== 'all') return { rows: [], nextCursor: null }
  const from = readCursor(query.cursor)
  const below = from && Number(from.value)
  if (below !== null && !(Number.isInteger(below) && below > 0 && below < 2 ** 31)) throw badField('cursor', 'This is not a cursor from an earlier answer.')
  const found = await select(db).where(and(
    eq(runs.benchId, reader.benchId), scenarioId ? eq(runs.scenarioId, scenarioId) : undefined,
    query.bin === '1' ? inBin(runs.deletedAt) : isNull(runs.deletedAt), below === null ? undefined : lt(runs.number, below),
  )).orderBy(desc(runs.number)).limit(query.limit + 1)
  const rows = found.slice(0, query.limit).map(raw => asRow(raw, reader))
  const last = rows.at(-1)
  return { rows, nextCursor: found.length > query.limit && last ? writeCursor(String(last.number), last.runId) : null }
}

export async function describeRun(db: Handle, reader: Reader, runId: string): Promise<RunDetail> {
  const [raw] = await select(db).where(eq(runs.runId, runId))
  const [rest] = await db.select({
    outcome: runs.outcome, durationMs: runs.durationMs, workers: runs.workers, replicatesAsked: runs.replicatesAsked,
    document: scenarioRevisions.document, scenarioBinned: sql<boolean>`${scenarios.deletedAt} is not null`,
  }).from(runs).innerJoin(scenarios, eq(scenarios.scenarioId, runs.scenarioId))
    .innerJoin(scenarioRevisions, and(eq(scenarioRevisions.scenarioId, runs.scenarioId), eq(scenarioRevisions.revision, runs.revision))).where(eq(runs.runId, runId))
  if (!raw || !rest) throw problem('not_found')
  return { ...asRow(raw, reader), benchId: raw.benchId, ...rest }
}

export async function readBlocks(db: Handle, runId: string): Promise<ReplicateBlock[]> {
  const rows = await db.select({ block: runBlocks.block }).from(runBlocks).where(eq(runBlocks.runId, runId)).orderBy(asc(runBlocks.position))
  return rows.map(row => row.block)
}
