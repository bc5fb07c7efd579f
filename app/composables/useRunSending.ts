/** Sends finished runs to the bench: once by its key, later again where the connection or the database is away. */
import type { RunDetail } from '#shared/schemas/api/run'
import { SAVED_REPLICATES_LIMIT } from '#shared/schemas/api/run'
import type { LocalRun } from '~/utils/localRun'

/** What the server takes of one run [bytes]. */
export const SAVED_BYTES_LIMIT = 8_388_608
/** Waits between tries [ms]; the last one goes on. */
const RETRY_AFTER_MS = [4_000, 15_000, 60_000] as const
const LATER = new Set(['no_connection', 'database_away', 'too_many', 'fault', 'sign_in_first'])

const REASONS: Record<string, string> = {
  no_connection: 'No connection; it is sent when the connection is back.',
  database_away: 'The database does not answer; it is sent when it is back.',
  too_many: 'The server asks to wait; it is sent a little later.',
  fault: 'The server failed at it; it is sent again later.',
  sign_in_first: 'You are signed out; it is sent after you sign in again.',
}

/** `isMine`: the run belongs to who is signed in now; another person's is never sent under this one's name. */
export function useRunSending(settled: (run: LocalRun) => void, isMine: (run: LocalRun) => boolean) {
  const api = useApi()
  const tries = new Map<string, number>()
  const timers = new Map<string, ReturnType<typeof setTimeout>>()

  async function bodyOf(run: LocalRun): Promise<string> {
    const desk = await useOutcomeDesk()
    return desk.body(run.localId, {
      revision: run.asked.revision!, engine: run.engine!, replicatesAsked: run.asked.replicates, partial: run.outcome!.partial,
      digest: run.outcome!.digest, durationMs: Math.round(run.durationMs), workers: Math.max(1, run.workers),
    })
  }
  function refuse(run: LocalRun, state: 'refused' | 'file', reason: string) {
    run.send = { ...run.send, state, reason }
    settled(run)
  }
  function later(run: LocalRun, code: string, waitMs?: number) {
    const tried = tries.get(run.localId) ?? 0
    tries.set(run.localId, tried + 1)
    run.send = { ...run.send, state: 'unsent', reason: REASONS[code] ?? REASONS.fault! }
    clearTimeout(timers.get(run.localId))
    timers.set(run.localId, setTimeout(() => send(run), waitMs ?? RETRY_AFTER_MS[Math.min(tried, RETRY_AFTER_MS.length - 1)]))
  }

  async function send(run: LocalRun): Promise<void> {
    if (run.state === 'running' || run.send.state === 'sending' || run.send.state === 'sent' || !run.outcome || !run.engine || run.asked.scenarioId === null || run.asked.revision === null) return
    clearTimeout(timers.get(run.localId))
    if (!isMine(run)) {
      run.send = { ...run.send, state: 'unsent', reason: REASONS.sign_in_first! }
      return
    }
    if (run.outcome.replicates > SAVED_REPLICATES_LIMIT)
      return refuse(run, 'file', `A saved run has at most ${SAVED_REPLICATES_LIMIT} replicates; this one has ${run.outcome.replicates}. Take it as a file.`)
    run.send = { ...run.send, state: 'sending', reason: null }
    try {
      const body = await bodyOf(run)
      if (body.length > SAVED_BYTES_LIMIT) return refuse(run, 'file', `A saved run has at most 8 MB; this one has ${(body.length / 1_048_576).toFixed(1)} MB. Take it as a file.`)
      const saved = await api<RunDetail>(`/api/scenarios/${run.asked.scenarioId}/runs`, {
        method: 'POST', body, headers: { 'idempotency-key': run.localId, 'content-type': 'application/json' },
      })
      tries.delete(run.localId)
      run.send = { state: 'sent', reason: null, runId: saved.runId, number: saved.number, savedAt: saved.savedAt }
      settled(run)
    } catch (thrown) {
      const refusal = refusalOf(thrown)
      if (LATER.has(refusal.code)) later(run, refusal.code, refusal.retryAfterSeconds ? refusal.retryAfterSeconds * 1000 : undefined)
      else refuse(run, 'refused', refusal.errors[0] ? `${sentenceOf(refusal)} ${refusal.errors[0].path}: ${refusal.errors[0].message}` : sentenceOf(refusal))
    }
  }
  function forget(localId: string) {
    clearTimeout(timers.get(localId))
    timers.delete(localId)
    tries.delete(localId)
  }
  return { send, forget }
}
