/** What the audit reads and writes. */
import { and, asc, eq } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { runBlocks, runs, scenarioRevisions } from '../db/schema'
import { recordEvent } from './audit-trail'

export async function waitingRuns(db: Handle): Promise<string[]> {
  const rows = await db.select({ runId: runs.runId }).from(runs).where(eq(runs.auditState, 'waiting')).orderBy(asc(runs.savedAt)).limit(1000)
  return rows.map(row => row.runId)
}

/** Everything that a new walk needs, and the digests it must meet. */
export async function readForAudit(db: Handle, runId: string) {
  const [run] = await db.select({ runId: runs.runId, benchId: runs.benchId, scenarioId: runs.scenarioId, revision: runs.revision, seed: runs.seed, algorithm: runs.algorithm, engineVersion: runs.engineVersion, state: runs.auditState, document: scenarioRevisions.document, ranges: runs.outcome })
    .from(runs).innerJoin(scenarioRevisions, and(eq(scenarioRevisions.scenarioId, runs.scenarioId), eq(scenarioRevisions.revision, runs.revision))).where(eq(runs.runId, runId))
  if (!run || run.state !== 'waiting') return undefined
  const { ranges, ...rest } = run
  const stored = await db.select({ digest: runBlocks.digest }).from(runBlocks).where(eq(runBlocks.runId, runId)).orderBy(asc(runBlocks.position))
  return { ...rest, blocks: ranges.blocks.map(({ from, to }, i) => ({ from, to, digest: stored[i]!.digest })) }
}
export type AuditedRun = NonNullable<Awaited<ReturnType<typeof readForAudit>>>

export interface AuditFinding { state: 'audited' | 'refused' | 'cannot', blocksRedrawn: number, detection: number, note?: string }

export async function writeFinding(db: Database, run: AuditedRun, finding: AuditFinding): Promise<void> {
  await db.transaction(async (tx) => {
    const done = await tx.update(runs).set({ auditState: finding.state, auditBlocks: finding.blocksRedrawn, auditDetection: finding.detection, auditAt: new Date() })
      .where(and(eq(runs.runId, run.runId), eq(runs.auditState, 'waiting'))).returning({ runId: runs.runId })
    if (!done.length || finding.state === 'cannot') return
    await recordEvent(tx, {
      kind: finding.state === 'audited' ? 'run-audited' : 'run-refused', actorId: null, benchId: run.benchId, scenarioId: run.scenarioId, revision: run.revision, runId: run.runId,
      note: finding.note ?? `${finding.blocksRedrawn} of ${run.blocks.length} blocks walked again.`,
    })
  })
}
