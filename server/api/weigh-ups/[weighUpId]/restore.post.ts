/** POST /api/weigh-ups/:weighUpId/restore - out of the bin. */
import { unbinWeighUp } from '../../../services/weigh-ups'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'weigh-up.delete', { bin: true })
  return unbinWeighUp(useDatabase(), member, member.itemId)
})
