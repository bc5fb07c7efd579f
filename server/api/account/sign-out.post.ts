/** POST /api/account/sign-out - end this session. */
import { recordEvent } from '../../services/audit-trail'
import { endSession } from '../../services/sessions'

export default defineEventHandler(async (event) => {
  const person = await signedIn(event)
  await endSession(useDatabase(), person.sessionId)
  await recordEvent(useDatabase(), { kind: 'signed-out', actorId: person.userId })
  await clearUserSession(event)
  return sendNoContent(event)
})
