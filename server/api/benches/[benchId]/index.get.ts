/** GET /api/benches/:benchId - a bench and the reader's role on it. */
import { describeBench } from '../../../services/benches'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'bench.read')
  return describeBench(useDatabase(), member.benchId, member.role)
})
