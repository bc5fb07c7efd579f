/** Attempts per account and per address, counted in the database so that several processes and restarts share them. */
import { createHash } from 'node:crypto'
import { eq, inArray, lt, sql } from 'drizzle-orm'
import type { Handle } from '../db/client'
import { throttles } from '../db/schema'
import { problem } from '../utils/problem'

export interface ThrottleLimits {
  windowSeconds: number
  /** Attempts within the window that are answered at full speed. */
  perAccount: number
  perAddress: number
  /** Delay of the first slowed answer; it grows with each further one, up to eight times this [ms]. */
  slowMilliseconds: number
  /** From this many attempts on: 429 until the window has run out. */
  refuseAfter: number
}

const subjectOf = (kind: 'account' | 'address', name: string) => `${kind}:${createHash('sha256').update(name).digest('hex')}`

/** Counts an attempt before it is judged, so that attempts sent side by side are all counted. */
async function countAttempt(db: Handle, subject: string, windowSeconds: number) {
  const over = sql`${throttles.windowStartedAt} < now() - make_interval(secs => ${windowSeconds})`
  const [row] = await db.insert(throttles).values({ subject, attempts: 1 }).onConflictDoUpdate({
    target: throttles.subject,
    set: { attempts: sql`case when ${over} then 1 else ${throttles.attempts} + 1 end`, windowStartedAt: sql`case when ${over} then now() else ${throttles.windowStartedAt} end` },
  }).returning({ attempts: throttles.attempts, remaining: sql<number>`extract(epoch from ${throttles.windowStartedAt} + make_interval(secs => ${windowSeconds}) - now())::float8` })
  return row!
}

/**
 * Judges one attempt; an account is slowed by its own failures whether it exists or not.
 * @returns how long the answer is to wait [ms]
 */
export async function takeAttempt(db: Handle, limits: ThrottleLimits, address: string, mail?: string): Promise<number> {
  const counted = [{ ...await countAttempt(db, subjectOf('address', address), limits.windowSeconds), free: limits.perAddress }]
  if (mail !== undefined) counted.push({ ...await countAttempt(db, subjectOf('account', mail), limits.windowSeconds), free: limits.perAccount })
  const refused = counted.filter(one => one.attempts > limits.refuseAfter)
  if (refused.length) throw problem('too_many', { retryAfterSeconds: Math.ceil(Math.max(1, ...refused.map(one => one.remaining))) })
  const excess = Math.max(...counted.map(one => one.attempts - one.free))
  return excess > 0 ? Math.min(excess, 8) * limits.slowMilliseconds : 0
}

/** A right pass phrase clears the account's count and takes its own attempt off the address's. */
export async function forgiveAttempts(db: Handle, address: string, mail: string): Promise<void> {
  await db.delete(throttles).where(eq(throttles.subject, subjectOf('account', mail)))
  await db.update(throttles).set({ attempts: sql`greatest(${throttles.attempts} - 1, 0)` }).where(inArray(throttles.subject, [subjectOf('address', address)]))
}

/** Windows that ran out are of no use. */
export async function dropOldWindows(db: Handle, windowSeconds: number): Promise<void> {
  await db.delete(throttles).where(lt(throttles.windowStartedAt, sql`now() - make_interval(secs => ${windowSeconds})`))
}
