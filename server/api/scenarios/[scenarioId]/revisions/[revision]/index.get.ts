/** GET /api/scenarios/:scenarioId/revisions/:revision - one saved state. */
import { describeRevision } from '../../../../../services/revisions'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.read')
  return describeRevision(useDatabase(), member.itemId, revisionParam(event))
})
