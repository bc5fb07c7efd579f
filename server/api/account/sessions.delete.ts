/** DELETE /api/account/sessions - sign out everywhere; other browsers notice at their next request. */
import { recordEvent } from '../../services/audit-trail'
import { endAllSessions } from '../../services/sessions'

export default defineEventHandler(async (event) => {
  const person = await signedIn(event)
  await endAllSessions(useDatabase(), person.userId)
  await recordEvent(useDatabase(), { kind: 'signed-out-everywhere', actorId: person.userId })
  await clearUserSession(event)
  return sendNoContent(event)
})
