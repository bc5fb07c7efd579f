/** How a scenario is read: one set of columns for the list, the detail and the answer of every change. */
import { and, asc, desc, eq, isNull, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import { inBin } from '../db/bin'
import type { Handle } from '../db/client'
import { scenarioRevisions, scenarios, users } from '../db/schema'
import { may, reachOf, type Role } from '../../shared/permissions'
import type { Page } from '../../shared/schemas/api/bench'
import type { ScenarioDetail, ScenarioListSchema, ScenarioRow } from '../../shared/schemas/api/scenario'
import { problem } from '../utils/problem'
import { cursorTime, readCursor, writeCursor } from './paging'

/** Who reads: decides what may be edited and deleted. */
export interface Reader { userId: string, role: Role, benchId: string }

const maker = alias(users, 'maker')
const editor = alias(users, 'editor')
const columns = {
  scenarioId: scenarios.scenarioId, title: scenarios.title, revision: scenarios.revision, makerId: scenarios.createdBy,
  createdBy: maker.name, updatedBy: editor.name, createdAt: scenarios.createdAt, updatedAt: scenarios.updatedAt, deletedAt: scenarios.deletedAt,
  tags: sql<string[]>`(select coalesce(array_agg(tags.tag order by tags.tag), '{}') from tags where tags.scenario_id = ${scenarios.scenarioId})`,
  runs: sql<number>`(select count(*)::int from runs where runs.scenario_id = ${scenarios.scenarioId} and runs.deleted_at is null)`,
}
type Raw = { [Name in keyof ScenarioRow as Name extends 'mayEdit' | 'mayDelete' | 'createdAt' | 'updatedAt' | 'deletedAt' ? never : Name]: ScenarioRow[Name] }
  & { makerId: string, createdAt: Date, updatedAt: Date, deletedAt: Date | null }

function asRow({ makerId, ...raw }: Raw, reader: Reader): ScenarioRow {
  const item = { owns: makerId === reader.userId }
  return {
    ...raw, createdAt: raw.createdAt.toISOString(), updatedAt: raw.updatedAt.toISOString(), deletedAt: raw.deletedAt?.toISOString() ?? null,
    mayEdit: may(reader.role, 'scenario.edit', item), mayDelete: may(reader.role, 'scenario.delete', item),
  }
}

const TEXT_KEY = sql<string>`lower(${scenarios.title})`
const KEYS = { updated: scenarios.updatedAt, created: scenarios.createdAt, title: TEXT_KEY }
const keyOf = (row: ScenarioRow & { sortTitle: string }, sort: keyof typeof KEYS) =>
  sort === 'title' ? row.sortTitle : sort === 'created' ? row.createdAt : row.updatedAt

export async function listScenarios(db: Handle, reader: Reader, query: z.output<typeof ScenarioListSchema>): Promise<Page<ScenarioRow>> {
  // Nothing can be shared with a guest yet, so nothing is listed for one.
  if (reachOf(reader.role, 'scenario.read') !== 'all') return { rows: [], nextCursor: null }
  const { search, tag, sort, order, bin, limit } = query
  const from = readCursor(query.cursor)
  const value = from && (sort === 'title' ? from.value : cursorTime(from.value).toISOString())
  const past = from && sql`(${KEYS[sort]}, ${scenarios.scenarioId}) ${order === 'asc' ? sql`>` : sql`<`} (${value}${sort === 'title' ? sql`::text` : sql`::timestamptz`}, ${from.id}::uuid)`
  const conditions: (SQL | undefined)[] = [
    eq(scenarios.benchId, reader.benchId),
    bin === '1' ? inBin(scenarios.deletedAt) : isNull(scenarios.deletedAt),
    search ? sql`(position(lower(${search}) in lower(${scenarios.title})) > 0 or exists (select 1 from tags where tags.scenario_id = ${scenarios.scenarioId} and position(lower(${search}) in lower(tags.tag)) > 0))` : undefined,
    tag ? sql`exists (select 1 from tags where tags.scenario_id = ${scenarios.scenarioId} and tags.tag = ${tag})` : undefined,
    past ?? undefined,
  ]
  const direction = order === 'asc' ? asc : desc
  const found = await db.select({ ...columns, sortTitle: TEXT_KEY }).from(scenarios)
    .innerJoin(maker, eq(maker.userId, scenarios.createdBy)).innerJoin(editor, eq(editor.userId, scenarios.updatedBy))
    .where(and(...conditions)).orderBy(direction(KEYS[sort]), direction(scenarios.scenarioId)).limit(limit + 1)
  const rows = found.slice(0, limit).map(({ sortTitle, ...raw }) => ({ row: asRow(raw, reader), sortTitle }))
  const last = rows.at(-1)
  return {
    rows: rows.map(one => one.row),
    nextCursor: found.length > limit && last ? writeCursor(keyOf({ ...last.row, sortTitle: last.sortTitle }, sort), last.row.scenarioId) : null,
  }
}

export async function describeScenario(db: Handle, reader: Reader, scenarioId: string): Promise<ScenarioDetail> {
  const [found] = await db.select({ ...columns, document: scenarioRevisions.document, digest: scenarioRevisions.digest }).from(scenarios)
    .innerJoin(maker, eq(maker.userId, scenarios.createdBy)).innerJoin(editor, eq(editor.userId, scenarios.updatedBy))
    .innerJoin(scenarioRevisions, and(eq(scenarioRevisions.scenarioId, scenarios.scenarioId), eq(scenarioRevisions.revision, scenarios.revision)))
    .where(eq(scenarios.scenarioId, scenarioId))
  if (!found) throw problem('not_found')
  const { document, digest, ...raw } = found
  return { ...asRow(raw, reader), benchId: reader.benchId, document, digest }
}
