/** POST /api/benches/:benchId/recordings - make recordings from a kept file, one for each condition chosen. */
import { RecordingCreateSchema } from '#shared/schemas/api/recording'
import { createRecordings } from '../../../services/recording-create'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.create')
  const wanted = await readInput(event, RecordingCreateSchema)
  const made = await createRecordings(useDatabase(), member, wanted)
  setResponseStatus(event, 201)
  return made
})
