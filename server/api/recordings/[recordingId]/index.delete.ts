/** DELETE /api/recordings/:recordingId - into the bin, from where it can be taken back. */
import { binRecording } from '../../../services/recording-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.delete')
  await binRecording(useDatabase(), member, member.itemId)
  return sendNoContent(event)
})
