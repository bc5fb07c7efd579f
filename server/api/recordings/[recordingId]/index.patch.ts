/** PATCH /api/recordings/:recordingId - set rows aside with a reason, or take them back. */
import { PointsAsideSchema } from '#shared/schemas/api/recording'
import { setPointsAside } from '../../../services/recording-edits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.edit')
  const revision = requireIfMatch(event)
  const change = await readInput(event, PointsAsideSchema)
  return withEtag(event, await setPointsAside(useDatabase(), member, member.itemId, revision, change))
})
