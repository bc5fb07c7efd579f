/** POST /api/account/register - make an account and sign in. */
import { RegisterSchema } from '#shared/schemas/api/account'
import { createUser, describeMe } from '../../services/users'

export default defineEventHandler(async (event) => {
  publicRoute(event)
  const { mail, name, passPhrase } = await readInput(event, RegisterSchema)
  await slowDown(event)
  const userId = await createUser(useDatabase(), { mail, name, passHash: await hashPassword(passPhrase) })
  await openSession(event, userId)
  setResponseStatus(event, 201)
  return describeMe(useDatabase(), userId)
})
