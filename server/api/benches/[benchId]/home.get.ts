/** GET /api/benches/:benchId/home - what stands where. */
import { describeHome } from '../../../services/bench-home'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'bench.read')
  return describeHome(useDatabase(), member)
})
