/** Accounts: found by mail, made once. */
import { eq, sql } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { benches, memberships, users } from '../db/schema'
import type { Me } from '../../shared/schemas/api/account'
import { problem } from '../utils/problem'
import { recordEvent } from './audit-trail'

export interface NewUser { mail: string, name: string, passHash: string, createdAt?: Date, demo?: boolean }

export async function findUserByMail(db: Handle, mail: string) {
  const [found] = await db.select().from(users).where(eq(users.mail, mail))
  return found
}

/** 409 where the address has an account: uniqueness is the database's to keep. */
export async function createUser(db: Database, person: NewUser): Promise<string> {
  return db.transaction(async (tx) => {
    const [made] = await tx.insert(users).values(person).onConflictDoNothing().returning({ userId: users.userId })
    if (!made) throw problem('already_there', { detail: 'An account with this mail address exists. Sign in instead.', errors: [{ path: 'mail', message: 'An account with this mail address exists.' }] })
    await recordEvent(tx, { kind: 'account-registered', actorId: made.userId, at: person.createdAt })
    return made.userId
  })
}

/** What the person and the interface may know of the account. */
export async function describeMe(db: Handle, userId: string): Promise<Me> {
  const [user] = await db.select({ mail: users.mail, name: users.name }).from(users).where(eq(users.userId, userId))
  if (!user) throw problem('sign_in_first')
  const rows = await db.select({ benchId: benches.benchId, name: benches.name, role: memberships.role })
    .from(memberships).innerJoin(benches, eq(benches.benchId, memberships.benchId))
    .where(eq(memberships.userId, userId)).orderBy(sql`lower(${benches.name})`, benches.benchId)
  return { userId, ...user, benches: rows }
}

/** A wrong pass phrase; with no account the same statement finds nothing, so that both take the same work. */
export async function noteFailedSignIn(db: Handle, mail: string): Promise<void> {
  await db.update(users).set({ failedSignIns: sql`${users.failedSignIns} + 1`, lastFailedAt: sql`now()` }).where(eq(users.mail, mail))
}

/** @returns what went wrong before this sign-in, to be told once */
export async function noteSignIn(db: Handle, userId: string, raisedHash: string | null): Promise<Me['failedSignIns']> {
  const [before] = await db.select({ count: users.failedSignIns, lastAt: users.lastFailedAt }).from(users).where(eq(users.userId, userId))
  await db.update(users).set({ failedSignIns: 0, ...(raisedHash && { passHash: raisedHash }) }).where(eq(users.userId, userId))
  return before?.count && before.lastAt ? { count: before.count, lastAt: before.lastAt.toISOString() } : undefined
}
