/** GET /api/benches/:benchId/weigh-ups - last change first. */
import { WeighUpListSchema } from '#shared/schemas/api/weigh-up'
import { listWeighUps } from '../../../services/weigh-ups'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'weigh-up.read')
  return listWeighUps(useDatabase(), member, readQuery(event, WeighUpListSchema))
})
