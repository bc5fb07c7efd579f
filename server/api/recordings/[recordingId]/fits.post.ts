/** POST /api/recordings/:recordingId/fits - fit by these settings and keep what was found. */
import { FitSettingsSchema } from '#shared/fitting/kept-fit'
import { keepFit } from '../../../services/fits'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.edit')
  const settings = await readInput(event, FitSettingsSchema)
  const kept = await keepFit(useDatabase(), member, member.itemId, settings)
  setResponseStatus(event, 201)
  return kept
})
