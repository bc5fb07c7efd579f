/** GET /api/benches/:benchId/mappings?shape= - how a file of this shape was read last; null where none was kept. */
import { MappingQuerySchema } from '#shared/schemas/api/recording'
import { findMapping } from '../../../services/recording-create'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.read')
  const { shape } = readQuery(event, MappingQuerySchema)
  return { mapping: await findMapping(useDatabase(), member.benchId, shape) }
})
