/** POST /api/benches/:benchId/scenarios - make a scenario; import is the same call with a file's document. */
import { ScenarioCreateSchema } from '#shared/schemas/api/scenario'
import { createScenario } from '../../../services/scenario-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.create')
  const edit = await readInput(event, ScenarioCreateSchema)
  const made = await createScenario(useDatabase(), member, edit)
  setResponseStatus(event, 201)
  return withEtag(event, made)
})
