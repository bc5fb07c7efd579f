/** DELETE /api/runs/:runId - into the bin, from where it can be taken back. */
import { binRun } from '../../../services/run-bin'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'run.delete')
  await binRun(useDatabase(), member, member.itemId)
  return sendNoContent(event)
})
