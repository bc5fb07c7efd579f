/** DELETE /api/scenarios/:scenarioId - into the bin, from where it can be taken back. */
import { binScenario } from '../../../services/scenario-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'scenario.delete')
  await binScenario(useDatabase(), member, member.itemId)
  return sendNoContent(event)
})
