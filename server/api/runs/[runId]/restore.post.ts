/** POST /api/runs/:runId/restore - out of the bin. */
import { unbinRun } from '../../../services/run-bin'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'run.delete', { bin: true })
  return unbinRun(useDatabase(), member, member.itemId)
})
