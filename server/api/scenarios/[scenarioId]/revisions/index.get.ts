/** GET /api/scenarios/:scenarioId/revisions - history, newest first. */
import { listRevisions } from '../../../../services/revisions'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.read')
  return listRevisions(useDatabase(), member.itemId)
})
