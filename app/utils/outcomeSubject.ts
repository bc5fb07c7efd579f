/** An outcome with where it comes from, whether it lies on the bench or on this device. */
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

export function subjectOfSaved(run: RunDetail): OutcomeSubject {
  return {
    outcome: run.outcome, scenario: run.document, title: run.title, scenarioId: run.scenarioId, revision: run.revision, number: run.number, runId: run.runId, localId: null,
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
/** Names by which several outcomes can be told apart: `Run 14`; those on this device by title, and by seed where titles are equal. */
export function subjectNames(subjects: readonly OutcomeSubject[]): string[] {
  const short = (text: string, most: number) => text.length > most ? `${text.slice(0, most - 1)}…` : text
  const plain = subjects.map(subject => subject.number === null ? `“${short(subject.title, 28)}” here` : `Run ${subject.number}`)
  return plain.map((name, i) => plain.filter(other => other === name).length > 1 ? `${name}, seed ${short(subjects[i]!.outcome.seed, 14)}, ${subjects[i]!.outcome.replicates} replicates` : name)
}
