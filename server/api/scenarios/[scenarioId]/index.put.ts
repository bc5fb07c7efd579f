/** PUT /api/scenarios/:scenarioId - save an edit that was made from the revision named in If-Match. */
import { ScenarioEditSchema } from '#shared/schemas/api/scenario'
import { saveScenario } from '../../../services/scenario-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.edit')
  const revision = requireIfMatch(event)
  const edit = await readInput(event, ScenarioEditSchema)
  return withEtag(event, await saveScenario(useDatabase(), member, member.itemId, revision, edit))
})
