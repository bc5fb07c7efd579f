/** Signed-in browsers. The key travels in the sealed cookie; the table holds its hash and is asked at every request. */
import { createHash, randomBytes } from 'node:crypto'
import { and, desc, eq, gt, lt, sql } from 'drizzle-orm'
import type { Handle } from '../db/client'
import { sessions, users } from '../db/schema'
import type { SessionRow } from '../../shared/schemas/api/account'

/** A session ends this long after its start [ms]. */
export const SESSION_MS = 30 * 24 * 3600 * 1000
/** Last-seen is written at most this often, so that reading does not turn into writing. */
const SEEN_EVERY = sql`interval '1 minute'`

const hashOf = (key: string) => createHash('sha256').update(key).digest('hex')

/** @returns the key for the cookie; it is kept nowhere else */
export async function startSession(db: Handle, userId: string, agent: string): Promise<string> {
  const key = randomBytes(32).toString('base64url')
  await db.delete(sessions).where(and(eq(sessions.userId, userId), lt(sessions.expiresAt, sql`now()`)))
  await db.insert(sessions).values({ userId, keyHash: hashOf(key), agent: agent.slice(0, 300), expiresAt: new Date(Date.now() + SESSION_MS) })
  return key
}

export interface Person { userId: string, sessionId: string, name: string, mail: string, demo: boolean }

export async function findSession(db: Handle, key: string): Promise<Person | undefined> {
  const [found] = await db.select({ userId: users.userId, sessionId: sessions.sessionId, name: users.name, mail: users.mail, demo: users.demo, stale: sql<boolean>`${sessions.lastSeenAt} < now() - ${SEEN_EVERY}` })
    .from(sessions).innerJoin(users, eq(users.userId, sessions.userId))
    .where(and(eq(sessions.keyHash, hashOf(key)), gt(sessions.expiresAt, sql`now()`)))
  if (!found) return undefined
  const { stale, ...person } = found
  if (stale) await db.update(sessions).set({ lastSeenAt: sql`now()` }).where(eq(sessions.sessionId, person.sessionId))
  return person
}

export async function endSession(db: Handle, sessionId: string): Promise<void> {
  await db.delete(sessions).where(eq(sessions.sessionId, sessionId))
}
export async function endAllSessions(db: Handle, userId: string): Promise<void> {
  await db.delete(sessions).where(eq(sessions.userId, userId))
}

export async function listSessions(db: Handle, person: Person): Promise<SessionRow[]> {
  const rows = await db.select().from(sessions).where(and(eq(sessions.userId, person.userId), gt(sessions.expiresAt, sql`now()`))).orderBy(desc(sessions.startedAt)).limit(100)
  return rows.map(row => ({
    sessionId: row.sessionId, startedAt: row.startedAt.toISOString(), lastSeenAt: row.lastSeenAt.toISOString(), agent: row.agent, current: row.sessionId === person.sessionId,
  }))
}
