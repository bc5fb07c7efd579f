/** POST /api/scenarios/:scenarioId/revisions/:revision/restore - an old revision becomes the newest again. */
import { restoreRevision } from '../../../../../services/revisions'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.edit')
  const from = requireIfMatch(event)
  return withEtag(event, await restoreRevision(useDatabase(), member, member.itemId, from, revisionParam(event)))
})
