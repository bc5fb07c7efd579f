/** Benches and who belongs to them. */
import { and, asc, eq, sql } from 'drizzle-orm'
import type { Database, Handle } from '../db/client'
import { benches, memberships, users } from '../db/schema'
import type { Role } from '../../shared/permissions'
import type { Bench, Member } from '../../shared/schemas/api/bench'
import { problem } from '../utils/problem'
import { recordEvent } from './audit-trail'

export async function createBench(db: Database, userId: string, name: string, at = new Date()): Promise<Bench> {
  return db.transaction(async (tx) => {
    const [bench] = await tx.insert(benches).values({ name, createdBy: userId, createdAt: at }).returning()
    await tx.insert(memberships).values({ benchId: bench!.benchId, userId, role: 'lead', since: at })
    await recordEvent(tx, { kind: 'bench-created', actorId: userId, benchId: bench!.benchId, note: name, at })
    return { benchId: bench!.benchId, name, role: 'lead' as const, createdAt: at.toISOString() }
  })
}

export async function describeBench(db: Handle, benchId: string, role: Role): Promise<Bench> {
  const [bench] = await db.select().from(benches).where(eq(benches.benchId, benchId))
  if (!bench) throw problem('not_found')
  return { benchId, name: bench.name, role, createdAt: bench.createdAt.toISOString() }
}

export async function renameBench(db: Database, member: { userId: string, benchId: string, role: Role }, name: string): Promise<Bench> {
  return db.transaction(async (tx) => {
    await tx.update(benches).set({ name }).where(eq(benches.benchId, member.benchId))
    await recordEvent(tx, { kind: 'bench-renamed', actorId: member.userId, benchId: member.benchId, note: name })
    return describeBench(tx, member.benchId, member.role)
  })
}

const memberRow = { userId: users.userId, name: users.name, mail: users.mail, role: memberships.role, since: memberships.since }
const asMember = <Row extends { since: Date }>(row: Row) => ({ ...row, since: row.since.toISOString() })

export async function listMembers(db: Handle, benchId: string): Promise<Member[]> {
  const rows = await db.select(memberRow).from(memberships).innerJoin(users, eq(users.userId, memberships.userId))
    .where(eq(memberships.benchId, benchId)).orderBy(asc(memberships.since), asc(users.userId))
  return rows.map(asMember)
}

/** Adds someone; used by the demo bench and by invitations. An existing membership keeps its role. */
export async function addMember(db: Handle, benchId: string, userId: string, role: Role, at = new Date()): Promise<void> {
  await db.insert(memberships).values({ benchId, userId, role, since: at }).onConflictDoNothing()
}

/** Locks the bench's memberships, so that two leads cannot step down at once; refuses when the last lead would go. */
async function lockMember(tx: Handle, benchId: string, userId: string, staysLead: boolean) {
  const rows = await tx.select({ userId: memberships.userId, role: memberships.role }).from(memberships).where(eq(memberships.benchId, benchId)).orderBy(memberships.userId).for('update')
  const found = rows.find(row => row.userId === userId)
  if (!found) throw problem('not_found')
  if (found.role === 'lead' && !staysLead && rows.filter(row => row.role === 'lead').length === 1)
    throw problem('rule_of_the_bench', { detail: 'A bench keeps at least one lead. Make someone else a lead first.' })
}

export async function changeRole(db: Database, actor: { userId: string, benchId: string }, userId: string, role: Role): Promise<Member> {
  return db.transaction(async (tx) => {
    await lockMember(tx, actor.benchId, userId, role === 'lead')
    await tx.update(memberships).set({ role }).where(and(eq(memberships.benchId, actor.benchId), eq(memberships.userId, userId)))
    await recordEvent(tx, { kind: 'role-changed', actorId: actor.userId, benchId: actor.benchId, subjectId: userId, note: role })
    const [row] = await tx.select(memberRow).from(memberships).innerJoin(users, eq(users.userId, memberships.userId))
      .where(and(eq(memberships.benchId, actor.benchId), eq(memberships.userId, userId)))
    return asMember(row!)
  })
}

/** What the person made stays on the bench under their name. */
export async function removeMember(db: Database, actor: { userId: string, benchId: string }, userId: string): Promise<void> {
  await db.transaction(async (tx) => {
    await lockMember(tx, actor.benchId, userId, false)
    await tx.delete(memberships).where(and(eq(memberships.benchId, actor.benchId), eq(memberships.userId, userId)))
    await recordEvent(tx, { kind: 'member-removed', actorId: actor.userId, benchId: actor.benchId, subjectId: userId })
  })
}

export async function findBenchByName(db: Handle, name: string): Promise<string | undefined> {
  const [row] = await db.select({ benchId: benches.benchId }).from(benches).where(eq(benches.name, name)).orderBy(sql`${benches.createdAt}`).limit(1)
  return row?.benchId
}
