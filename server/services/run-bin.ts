/** Runs in and out of the bin; the audit trail names their scenario and revision too. */
import { eq } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { runs } from '../db/schema'
import { binItem, unbinItem } from './item-bin'
import { describeRun } from './run-rows'
import type { Reader } from './scenario-rows'

async function walkedFrom(db: Handle, runId: string) {
  const [found] = await db.select({ scenarioId: runs.scenarioId, revision: runs.revision }).from(runs).where(eq(runs.runId, runId))
  return found
}
export const binRun = (db: Database, reader: Reader, runId: string) => db.transaction(async tx => binItem(tx, reader, 'run', runId, await walkedFrom(tx, runId)))
export const unbinRun = (db: Database, reader: Reader, runId: string) => db.transaction(async (tx) => {
  await unbinItem(tx, reader, 'run', runId, await walkedFrom(tx, runId))
  return describeRun(tx, reader, runId)
})
