/** POST /api/scenarios/:scenarioId/runs - save a run; a retry with the same Idempotency-Key finds the first. */
export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'run.save')
  if (member.role === 'trainee') throw problem('rule_of_the_bench', { detail: 'Trainees write down what they expect first; predictions come with the ledger, so a trainee\'s run is not saved yet.' })
  const key = requireIdempotencyKey(event)
  const raw = await readRaw(event, useRuntimeConfig(event).runBodyLimitBytes)
  const { run, fresh } = await receiveRun(member, member.itemId, { key, bodyHash: fingerprintOf(raw) }, raw)
  setResponseStatus(event, fresh ? 201 : 200)
  if (fresh) auditSoon(run.runId)
  return run
})
