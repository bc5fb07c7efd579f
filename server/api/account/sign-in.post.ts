/** POST /api/account/sign-in - one and the same answer for an unknown address and a wrong pass phrase. */
import { SignInSchema } from '#shared/schemas/api/account'
import { recordEvent } from '../../services/audit-trail'
import { describeMe } from '../../services/users'

export default defineEventHandler(async (event) => {
  publicRoute(event)
  const { mail, passPhrase } = await readInput(event, SignInSchema)
  const { userId, failedSignIns } = await checkSignIn(event, mail.trim().toLowerCase(), passPhrase)
  await openSession(event, userId)
  await recordEvent(useDatabase(), { kind: 'signed-in', actorId: userId })
  return { ...await describeMe(useDatabase(), userId), ...(failedSignIns && { failedSignIns }) }
})
