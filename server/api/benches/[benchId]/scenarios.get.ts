/** GET /api/benches/:benchId/scenarios - search, tag, sort, page. */
import { ScenarioListSchema } from '#shared/schemas/api/scenario'
import { listScenarios } from '../../../services/scenario-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.read')
  return listScenarios(useDatabase(), member, readQuery(event, ScenarioListSchema))
})
