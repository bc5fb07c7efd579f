/** Runs in and out of the bin. */
import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import type { Database } from '../db/client'
import { runs } from '../db/schema'
import type { RunDetail } from '../../shared/schemas/api/run'
import { problem } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { describeRun } from './run-rows'
import type { Reader } from './scenario-rows'

export async function binRun(db: Database, reader: Reader, runId: string): Promise<void> {
  await db.transaction(async (tx) => {
    const [done] = await tx.update(runs).set({ deletedAt: sql`now()`, deletedBy: reader.userId })
      .where(and(eq(runs.runId, runId), isNull(runs.deletedAt))).returning({ scenarioId: runs.scenarioId, revision: runs.revision })
    if (!done) throw problem('not_found')
    await recordEvent(tx, { kind: 'run-binned', actorId: reader.userId, benchId: reader.benchId, runId, ...done })
  })
}
export async function unbinRun(db: Database, reader: Reader, runId: string): Promise<RunDetail> {
  return db.transaction(async (tx) => {
    const [done] = await tx.update(runs).set({ deletedAt: null, deletedBy: null })
      .where(and(eq(runs.runId, runId), isNotNull(runs.deletedAt))).returning({ scenarioId: runs.scenarioId, revision: runs.revision })
    if (done) await recordEvent(tx, { kind: 'run-restored', actorId: reader.userId, benchId: reader.benchId, runId, ...done })
    return describeRun(tx, reader, runId)
  })
}
