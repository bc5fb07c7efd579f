/** GET /api/runs/:runId/blocks - the integers behind the outcome. */
import { readBlocks } from '../../../services/run-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'run.read')
  return readBlocks(useDatabase(), member.itemId)
})
