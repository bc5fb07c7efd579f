/** GET /api/account/sessions - where the person is signed in. */
import { listSessions } from '../../services/sessions'

export default defineEventHandler(async (event) => {
  const person = await signedIn(event)
  return listSessions(useDatabase(), person)
})
