/** GET /api/recordings/:recordingId/fits - kept fits, newest first. */
import { listFits } from '../../../services/fits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.read')
  return listFits(useDatabase(), member.itemId)
})
