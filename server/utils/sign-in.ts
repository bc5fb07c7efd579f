/** Sign-in in constant work: unknown address and wrong phrase take the same queries and the same scrypt. */
import type { H3Event } from 'h3'
import { findUserByMail, noteFailedSignIn, noteSignIn } from '../services/users'
import { dropOldWindows, forgiveAttempts, takeAttempt } from '../services/throttles'
import type { Me } from '../../shared/schemas/api/account'

/** Made once a process from a phrase that nobody knows; verifying against it costs what a real one costs. */
let dummyHash: Promise<string> | undefined
const hashOfNobody = () => dummyHash ??= hashPassword(crypto.randomUUID())

export async function slowDown(event: H3Event, mail?: string): Promise<void> {
  const waitMs = await takeAttempt(useDatabase(), useRuntimeConfig(event).throttle, addressOf(event), mail)
  if (waitMs > 0) await new Promise(resolve => setTimeout(resolve, waitMs))
}

/** @returns the account and what went wrong before */
export async function checkSignIn(event: H3Event, mail: string, passPhrase: string): Promise<{ userId: string, failedSignIns: Me['failedSignIns'] }> {
  const db = useDatabase()
  await slowDown(event, mail)
  const user = await findUserByMail(db, mail)
  const right = await verifyPassword(user?.passHash ?? await hashOfNobody(), passPhrase)
  if (!user || !right || !mayComeIn(event, user)) {
    await noteFailedSignIn(db, mail)
    throw problem('wrong_sign_in')
  }
  const raised = passwordNeedsReHash(user.passHash) ? await hashPassword(passPhrase) : null
  const failedSignIns = await noteSignIn(db, user.userId, raised)
  await forgiveAttempts(db, addressOf(event), mail)
  await dropOldWindows(db, useRuntimeConfig(event).throttle.windowSeconds)
  return { userId: user.userId, failedSignIns }
}

/** Made before the first sign-in is answered, so that no first answer is slower than the others. */
export const prepareSignIn = () => hashOfNobody()
