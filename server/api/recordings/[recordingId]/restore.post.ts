/** POST /api/recordings/:recordingId/restore - out of the bin. */
import { unbinRecording } from '../../../services/recording-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.delete', { bin: true })
  return withEtag(event, await unbinRecording(useDatabase(), member, member.itemId))
})
