/** POST /api/scenarios/:scenarioId/restore - out of the bin. */
import { unbinScenario } from '../../../services/scenario-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.delete', { bin: true })
  return withEtag(event, await unbinScenario(useDatabase(), member, member.itemId))
})
