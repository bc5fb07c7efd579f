/** GET /api/weigh-ups/:weighUpId - the newest version. */
import { describeWeighUp } from '../../../services/weigh-ups'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'weigh-up.read')
  return describeWeighUp(useDatabase(), member, member.itemId)
})
