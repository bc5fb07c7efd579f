/** DELETE /api/weigh-ups/:weighUpId - into the bin, from where it can be taken back. */
import { binWeighUp } from '../../../services/weigh-ups'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'weigh-up.delete')
  await binWeighUp(useDatabase(), member, member.itemId)
  return sendNoContent(event)
})
