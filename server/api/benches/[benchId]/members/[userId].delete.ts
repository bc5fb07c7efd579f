/** DELETE /api/benches/:benchId/members/:userId - remove; what the person made stays. */
import { removeMember } from '../../../../services/benches'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'member.manage')
  await removeMember(useDatabase(), member, idParam(event, 'userId'))
  return sendNoContent(event)
})
