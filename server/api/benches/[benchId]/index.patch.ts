/** PATCH /api/benches/:benchId - rename. */
import { BenchEditSchema } from '#shared/schemas/api/bench'
import { renameBench } from '../../../services/benches'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'bench.settings')
  const { name } = await readInput(event, BenchEditSchema)
  return renameBench(useDatabase(), member, name)
})
