/** GET /api/benches/:benchId/members - who belongs to the bench. */
import { listMembers } from '../../../../services/benches'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'member.list')
  return listMembers(useDatabase(), member.benchId)
})
