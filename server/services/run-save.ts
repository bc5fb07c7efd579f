/** Stores a run whose figures were all made again here. A retry under the same key finds the first; nothing is half stored. */
import { and, eq, sql } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { benches, runBlocks, runs, scenarioRevisions } from '../db/schema'
import type { RunDetail, RunSave } from '../../shared/schemas/api/run'
import type { Outcome } from '../../shared/schemas/outcome'
import type { Scenario } from '../../shared/schemas/scenario'
import { badField } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { describeRun } from './run-rows'
import { summaryOf } from './run-summary'
import type { Reader } from './scenario-rows'

export interface Attempt { key: string, bodyHash: string }
/** A run as it came in, judged, with the outcome made here from its blocks. */
export interface JudgedRun { run: RunSave, outcome: Outcome }

/** The document that a run says it walked. */
export async function readRevisionDocument(db: Handle, scenarioId: string, revision: number): Promise<Scenario> {
  const [found] = await db.select({ document: scenarioRevisions.document }).from(scenarioRevisions)
    .where(and(eq(scenarioRevisions.scenarioId, scenarioId), eq(scenarioRevisions.revision, revision)))
  if (!found) throw badField('revision', `This scenario has no revision ${revision}.`)
  return found.document
}

/** @returns the run saved earlier under this key; another body under it is refused */
export async function findAttempt(db: Handle, reader: Reader, scenarioId: string, attempt: Attempt): Promise<RunDetail | undefined> {
  const [found] = await db.select({ runId: runs.runId, bodyHash: runs.bodyHash }).from(runs)
    .where(and(eq(runs.savedBy, reader.userId), eq(runs.scenarioId, scenarioId), eq(runs.idempotencyKey, attempt.key)))
  if (!found) return undefined
  if (found.bodyHash !== attempt.bodyHash) throw badField('Idempotency-Key', 'This key was used for another run. Make a new one for each run.')
  return describeRun(db, reader, found.runId)
}

class SeenMeanwhile extends Error {}

export async function storeRun(db: Database, reader: Reader, scenarioId: string, attempt: Attempt, judged: JudgedRun, at = new Date()): Promise<{ run: RunDetail, fresh: boolean }> {
  try {
    const runId = await db.transaction(tx => insertRun(tx, reader, scenarioId, attempt, judged, at))
    return { run: await describeRun(db, reader, runId), fresh: true }
  } catch (error) {
    if (!(error instanceof SeenMeanwhile)) throw error
    return { run: (await findAttempt(db, reader, scenarioId, attempt))!, fresh: false }
  }
}

async function insertRun(tx: Handle, reader: Reader, scenarioId: string, attempt: Attempt, { run, outcome }: JudgedRun, at: Date): Promise<string> {
  // The bench's row is locked by this: numbers have no gaps and two retries cannot pass each other.
  const [bench] = await tx.update(benches).set({ runsNumbered: sql`${benches.runsNumbered} + 1` }).where(eq(benches.benchId, reader.benchId)).returning({ number: benches.runsNumbered })
  const [made] = await tx.insert(runs).values({
    benchId: reader.benchId, number: bench!.number, scenarioId, revision: run.revision, seed: run.seed, replicates: outcome.replicates, replicatesAsked: run.replicatesAsked,
    partial: run.partial, engineVersion: run.engine.version, algorithm: run.engine.algorithm, outcome, summary: summaryOf(outcome), digest: outcome.digest, blocks: run.blocks.length,
    durationMs: run.durationMs, workers: run.workers, savedBy: reader.userId, savedAt: at, idempotencyKey: attempt.key, bodyHash: attempt.bodyHash,
  }).onConflictDoNothing({ target: [runs.savedBy, runs.scenarioId, runs.idempotencyKey] }).returning({ runId: runs.runId })
  if (!made) throw new SeenMeanwhile()
  // Long runs have a thousand blocks; a statement takes 65,535 parameters at most.
  const rows = run.blocks.map((block, position) => ({ runId: made.runId, position, digest: outcome.blocks[position]!.digest, block }))
  for (let i = 0; i < rows.length; i += 200) await tx.insert(runBlocks).values(rows.slice(i, i + 200))
  await recordEvent(tx, { kind: 'run-saved', actorId: reader.userId, benchId: reader.benchId, scenarioId, revision: run.revision, runId: made.runId, at })
  return made.runId
}
