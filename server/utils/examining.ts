/** The process's two examining threads: one for runs that someone waits for, one for the audits behind them. */
import { auditRun, type Replayer } from '../jobs/audit'
import { Examiner } from '../jobs/examiner'
import { findAttempt, readRevisionDocument, storeRun, type Attempt } from '../services/run-save'
import { readForAudit, waitingRuns, writeFinding } from '../services/run-audit'
import type { Reader } from '../services/scenario-rows'

const receiving = new Examiner()
const auditing = new Examiner()

/** Judging takes well under a second; building tables for the largest terminal some more [ms]. */
const JUDGE_MS = 120_000
/** One block of the longest walk allowed [ms]. */
const BLOCK_MS = 1_800_000

/** Judges, remakes and stores a run from its bytes. */
export async function receiveRun(reader: Reader, scenarioId: string, attempt: Attempt, raw: Buffer) {
  const db = useDatabase()
  const seen = await findAttempt(db, reader, scenarioId, attempt)
  if (seen) return { run: seen, fresh: false }
  const judged = await receiving.alone(async () => {
    const { revision } = await receiving.ask({ kind: 'parse', raw }, JUDGE_MS)
    return receiving.ask({ kind: 'examine', scenario: await readRevisionDocument(db, scenarioId, revision) }, JUDGE_MS)
  })
  return storeRun(db, reader, scenarioId, attempt, judged)
}

const replayer: Replayer = {
  async prepare({ document, algorithm, seed }) {
    await auditing.ask({ kind: 'prepare', scenario: document, algorithm, seed }, JUDGE_MS)
  },
  async walk(from, to) {
    return (await auditing.ask({ kind: 'walk', from, to }, BLOCK_MS)).digest
  },
}

async function auditOne(runId: string): Promise<void> {
  const run = await readForAudit(useDatabase(), runId)
  if (run) await writeFinding(useDatabase(), run, await auditRun(run, replayer, useRuntimeConfig().auditBudgetMs))
}

/** Queues an audit. A fault leaves the run waiting; the next start takes it up. */
export function auditSoon(runId: string): void {
  auditing.alone(() => auditOne(runId)).catch(error => console.error(`[audit] run ${runId}:`, error instanceof Error ? error.message : error))
}

/** Runs left waiting by an earlier process. */
export async function resumeAudits(): Promise<void> {
  for (const runId of await waitingRuns(useDatabase())) auditSoon(runId)
}

export function endExaminers(): void {
  for (const one of [receiving, auditing]) one.end(new Error('The server is ending.'))
}
