/** POST /api/weigh-ups/:weighUpId/versions - weigh again from the recordings as they stand now. */
import { WeighAgainSchema } from '#shared/schemas/api/weigh-up'
import { weighAgain } from '../../../../services/weigh-ups'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'weigh-up.edit')
  const change = await readInput(event, WeighAgainSchema)
  const made = await weighAgain(useDatabase(), member, member.itemId, change)
  setResponseStatus(event, 201)
  return made
})
