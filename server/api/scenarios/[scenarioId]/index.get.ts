/** GET /api/scenarios/:scenarioId - the newest document; its revision is the ETag. */
import { describeScenario } from '../../../services/scenario-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.read')
  return withEtag(event, await describeScenario(useDatabase(), member, member.itemId))
})
