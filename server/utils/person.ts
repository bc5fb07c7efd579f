/** Who is asking: the cookie's key is looked up in the sessions table once a request. */
import { getHeader, getRequestIP, type H3Event } from 'h3'
import { findSession, startSession, type Person } from '../services/sessions'

declare module 'h3' {
  interface H3EventContext {
    /** Kept for the length of one request; null: signed out. */
    moorage?: { person: Promise<Person | null> }
  }
}
declare module '#auth-utils' {
  interface SecureSessionData { key: string }
}

async function lookUp(event: H3Event): Promise<Person | null> {
  const { name } = useRuntimeConfig(event).session as { name: string }
  // Reading a session that is not there would make one: strangers get no cookie.
  if (!getCookie(event, name)) return null
  const { secure } = await getUserSession(event)
  const person = secure?.key ? await findSession(useDatabase(), secure.key) : undefined
  return person && mayComeIn(event, person) ? person : null
}

/** Demo accounts have a published pass phrase: they come in only where the server listens to its own machine. */
export function mayComeIn(event: H3Event, account: { demo: boolean }): boolean {
  const config = useRuntimeConfig(event)
  return !account.demo || config.demoAccounts || config.public.demoAccounts
}

export function personOf(event: H3Event): Promise<Person | null> {
  event.context.moorage ??= { person: lookUp(event) }
  return event.context.moorage.person
}

/** Makes a session row and gives the browser its key. A key from before the sign-in is replaced, never raised. */
export async function openSession(event: H3Event, userId: string): Promise<void> {
  const key = await startSession(useDatabase(), userId, getHeader(event, 'user-agent') ?? '')
  await replaceUserSession(event, { secure: { key } })
}

/** Address of the other end; behind a proxy of one's own, NUXT_TRUST_PROXY makes its X-Forwarded-For count. */
export const addressOf = (event: H3Event): string =>
  getRequestIP(event, { xForwardedFor: useRuntimeConfig(event).trustProxy }) ?? 'unknown'
