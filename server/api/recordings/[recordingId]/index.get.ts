/** GET /api/recordings/:recordingId - names, details, points, and how the file was read. */
import { describeRecording } from '../../../services/recording-rows'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.read')
  return withEtag(event, await describeRecording(useDatabase(), member, member.itemId))
})
