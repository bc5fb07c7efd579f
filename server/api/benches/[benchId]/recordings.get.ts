/** GET /api/benches/:benchId/recordings - search, tag, page. */
import { RecordingListSchema } from '#shared/schemas/api/recording'
import { listRecordings } from '../../../services/recording-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.read')
  return listRecordings(useDatabase(), member, readQuery(event, RecordingListSchema))
})
