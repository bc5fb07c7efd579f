/** PATCH /api/benches/:benchId/members/:userId - another role; it acts at that person's next request. */
import { MemberEditSchema } from '#shared/schemas/api/bench'
import { changeRole } from '../../../../services/benches'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'member.manage')
  const { role } = await readInput(event, MemberEditSchema)
  return changeRole(useDatabase(), member, idParam(event, 'userId'), role)
})
