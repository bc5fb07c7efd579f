/** PUT /api/recordings/:recordingId - names, details, notes and tags, from the revision named in If-Match. */
import { RecordingEditSchema } from '#shared/schemas/api/recording'
import { editRecording } from '../../../services/recording-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.edit')
  const revision = requireIfMatch(event)
  const edit = await readInput(event, RecordingEditSchema)
  return withEtag(event, await editRecording(useDatabase(), member, member.itemId, revision, edit))
})
