/** POST /api/benches/:benchId/weigh-ups - weigh explanations on recordings of the bench and keep what was found. */
import { WeighUpCreateSchema } from '#shared/schemas/api/weigh-up'
import { createWeighUp } from '../../../services/weigh-ups'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'weigh-up.create')
  const wanted = await readInput(event, WeighUpCreateSchema)
  const made = await createWeighUp(useDatabase(), member, wanted)
  setResponseStatus(event, 201)
  return made
})
