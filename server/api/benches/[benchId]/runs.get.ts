/** GET /api/benches/:benchId/runs - newest first. */
import { RunListSchema } from '#shared/schemas/api/run'
import { listRuns } from '../../../services/run-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'run.read')
  return listRuns(useDatabase(), member, readQuery(event, RunListSchema))
})
