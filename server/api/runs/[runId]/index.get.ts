/** GET /api/runs/:runId - a run with its outcome. */
import { describeRun } from '../../../services/run-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'run.read')
  return describeRun(useDatabase(), member, member.itemId)
})
