/** The history of a scenario. */
import { and, desc, eq, sql } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { scenarioRevisions, users } from '../db/schema'
import type { RevisionDetail, RevisionRow, ScenarioDetail } from '../../shared/schemas/api/scenario'
import { problem } from '../utils/problem'
import { saveScenario } from './scenario-edits'
import type { Reader } from './scenario-rows'

const columns = {
  revision: scenarioRevisions.revision, author: users.name, savedAt: scenarioRevisions.savedAt, message: scenarioRevisions.message, digest: scenarioRevisions.digest,
  runs: sql<number[]>`(select coalesce(array_agg(runs.number order by runs.number), '{}') from runs where runs.scenario_id = ${scenarioRevisions.scenarioId} and runs.revision = ${scenarioRevisions.revision} and runs.deleted_at is null)`,
}

export async function listRevisions(db: Handle, scenarioId: string): Promise<RevisionRow[]> {
  const rows = await db.select(columns).from(scenarioRevisions).innerJoin(users, eq(users.userId, scenarioRevisions.authorId))
    .where(eq(scenarioRevisions.scenarioId, scenarioId)).orderBy(desc(scenarioRevisions.revision)).limit(1000)
  return rows.map(row => ({ ...row, savedAt: row.savedAt.toISOString() }))
}

export async function describeRevision(db: Handle, scenarioId: string, revision: number): Promise<RevisionDetail> {
  const [row] = await db.select({ ...columns, document: scenarioRevisions.document }).from(scenarioRevisions).innerJoin(users, eq(users.userId, scenarioRevisions.authorId))
    .where(and(eq(scenarioRevisions.scenarioId, scenarioId), eq(scenarioRevisions.revision, revision)))
  if (!row) throw problem('not_found')
  return { ...row, savedAt: row.savedAt.toISOString() }
}

/** The old document becomes a new revision; nothing in between is lost. */
export async function restoreRevision(db: Database, reader: Reader, scenarioId: string, from: number, revision: number): Promise<ScenarioDetail> {
  const { document } = await describeRevision(db, scenarioId, revision)
  return saveScenario(db, reader, scenarioId, from, { document, message: `Revision ${revision} restored.` })
}
