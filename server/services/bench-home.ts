/** The bench at a glance: the newest scenarios with their last run, what changed, who belongs to it. */
import { and, desc, eq, inArray, isNull, sql } from 'drizzle-orm'
import type { Handle } from '../db/client'
import { auditEvents, CHANGE_KINDS, recordings, runs, scenarios, users, weighUps } from '../db/schema'
import type { BenchHome } from '../../shared/schemas/api/bench'
import { describeBench, listMembers } from './benches'
import type { Reader } from './scenario-rows'

const MOST = 10

async function newestScenarios(db: Handle, benchId: string): Promise<BenchHome['scenarios']> {
  const newest = await db.select({ scenarioId: scenarios.scenarioId, title: scenarios.title, revision: scenarios.revision, updatedAt: scenarios.updatedAt })
    .from(scenarios).where(and(eq(scenarios.benchId, benchId), isNull(scenarios.deletedAt))).orderBy(desc(scenarios.updatedAt), desc(scenarios.scenarioId)).limit(MOST)
  const last = newest.length === 0
    ? []
    : await db.selectDistinctOn([runs.scenarioId], { scenarioId: runs.scenarioId, runId: runs.runId, number: runs.number, savedAt: runs.savedAt, summary: runs.summary })
        .from(runs).where(and(inArray(runs.scenarioId, newest.map(one => one.scenarioId)), isNull(runs.deletedAt))).orderBy(runs.scenarioId, desc(runs.number))
  const byScenario = new Map(last.map(run => [run.scenarioId, run]))
  return newest.map(({ updatedAt, ...one }) => {
    const run = byScenario.get(one.scenarioId)
    return {
      ...one, updatedAt: updatedAt.toISOString(),
      lastRun: run ? { runId: run.runId, number: run.number, savedAt: run.savedAt.toISOString(), ...run.summary } : null,
    }
  })
}

async function newestChanges(db: Handle, benchId: string): Promise<BenchHome['changes']> {
  const rows = await db.select({
    kind: auditEvents.kind, who: users.name, at: auditEvents.at, scenarioId: auditEvents.scenarioId, title: sql<string>`coalesce(${scenarios.title}, ${recordings.title}, ${weighUps.title}, '')`,
    recordingId: auditEvents.recordingId, weighUpId: auditEvents.weighUpId, recordingGone: recordings.deletedAt, weighUpGone: weighUps.deletedAt,
    revision: auditEvents.revision, runId: auditEvents.runId, runNumber: runs.number, scenarioGone: scenarios.deletedAt, runGone: runs.deletedAt,
  }).from(auditEvents)
    .innerJoin(users, eq(users.userId, auditEvents.actorId)).leftJoin(scenarios, eq(scenarios.scenarioId, auditEvents.scenarioId)).leftJoin(recordings, eq(recordings.recordingId, auditEvents.recordingId))
    .leftJoin(weighUps, eq(weighUps.weighUpId, auditEvents.weighUpId)).leftJoin(runs, eq(runs.runId, auditEvents.runId))
    .where(and(eq(auditEvents.benchId, benchId), inArray(auditEvents.kind, [...CHANGE_KINDS]))).orderBy(desc(auditEvents.at), desc(auditEvents.eventId)).limit(MOST)
  return rows.map(({ scenarioGone, runGone, recordingGone, weighUpGone, ...row }) => ({
    ...row, kind: row.kind as BenchHome['changes'][number]['kind'], at: row.at.toISOString(), binned: scenarioGone ? 'scenario' : runGone ? 'run' : recordingGone ? 'recording' : weighUpGone ? 'weigh-up' : null,
  }))
}

export async function describeHome(db: Handle, reader: Reader): Promise<BenchHome> {
  const [bench, newest, changes, members, counted] = await Promise.all([
    describeBench(db, reader.benchId, reader.role), newestScenarios(db, reader.benchId), newestChanges(db, reader.benchId), listMembers(db, reader.benchId),
    db.select({ count: sql<number>`count(*)::int` }).from(scenarios).where(and(eq(scenarios.benchId, reader.benchId), isNull(scenarios.deletedAt))),
  ])
  return { bench, scenarios: newest, scenarioCount: counted[0]?.count ?? 0, changes, members: members.slice(0, MOST).map(({ name, role }) => ({ name, role })) }
}
