/** POST /api/scenarios/:scenarioId/duplicate - a copy with a history of its own. */
import { ScenarioDuplicateSchema } from '#shared/schemas/api/scenario'
import { duplicateScenario } from '../../../services/scenario-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.create')
  const { title } = await readInput(event, ScenarioDuplicateSchema)
  const made = await duplicateScenario(useDatabase(), member, member.itemId, title)
  setResponseStatus(event, 201)
  return withEtag(event, made)
})
