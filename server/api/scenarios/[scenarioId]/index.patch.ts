/** PATCH /api/scenarios/:scenarioId - tags alone make no revision. */
import { ScenarioTagsSchema } from '#shared/schemas/api/scenario'
import { setTags } from '../../../services/scenario-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.edit')
  const { tags } = await readInput(event, ScenarioTagsSchema)
  return withEtag(event, await setTags(useDatabase(), member, member.itemId, tags))
})
