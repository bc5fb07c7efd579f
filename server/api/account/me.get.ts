/** GET /api/account/me - who is signed in, and their benches. */
import { describeMe } from '../../services/users'

export default defineEventHandler(async (event) => {
  const person = await signedIn(event)
  return describeMe(useDatabase(), person.userId)
})
