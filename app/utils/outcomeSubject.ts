/** An outcome with where it comes from, whether it lies on the bench or on this device. */
import type { RevisionDetail } from '#shared/schemas/api/scenario'
import type { RunAudit, RunDetail } from '#shared/schemas/api/run'
import type { Outcome } from '#shared/schemas/outcome'
import type { Scenario } from '#shared/schemas/scenario'
import type { LocalRun } from './localRun'

export interface OutcomeSubject {
  outcome: Outcome
  scenario: Scenario
  title: string
  scenarioId: string | null
  revision: number | null
  number: number | null
  runId: string | null
  localId: string | null
  replicatesAsked: number
  durationMs: number
  workers: number
  who: string | null
  /** When it was saved, or finished on this device. */
  at: string
  audit: RunAudit | null
}

export function subjectOfSaved(run: RunDetail, revision: RevisionDetail): OutcomeSubject {
  return {
    outcome: run.outcome, scenario: revision.document, title: run.title, scenarioId: run.scenarioId, revision: run.revision, number: run.number, runId: run.runId, localId: null,
    replicatesAsked: run.replicatesAsked, durationMs: run.durationMs, workers: run.workers, who: run.savedBy, at: run.savedAt, audit: run.audit,
  }
}
export function subjectOfLocal(run: LocalRun): OutcomeSubject | null {
  if (!run.outcome) return null
  const { asked } = run
  return {
    outcome: run.outcome, scenario: asked.scenario, title: asked.title, scenarioId: asked.scenarioId, revision: asked.revision, number: run.send.number, runId: run.send.runId, localId: run.localId,
    replicatesAsked: asked.replicates, durationMs: run.durationMs, workers: run.workers, who: null, at: run.finishedAt ?? run.startedAt, audit: null,
  }
}
/** `Run 14` on the bench, `a run on this device` else. */
export const subjectName = (subject: OutcomeSubject) => subject.number === null ? 'a run on this device' : `Run ${subject.number}`
