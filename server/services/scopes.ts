/** Where a thing belongs and what the person is there: one query for each kind of path. */
import { and, eq, sql } from 'drizzle-orm'
import { isReachable } from '../db/bin'
import type { Handle } from '../db/client'
import { benches, memberships, runs, scenarios } from '../db/schema'
import type { Role } from '../../shared/permissions'

export interface Scope {
  kind: 'bench' | 'scenario' | 'run'
  benchId: string
  itemId: string
  /** Who made the item; on a bench nobody. */
  ownerId: string | null
  deleted: boolean
  /** Null: not a member. */
  role: Role | null
}

export async function findBenchScope(db: Handle, benchId: string, userId: string): Promise<Scope | undefined> {
  const [row] = await db.select({ role: memberships.role }).from(benches)
    .leftJoin(memberships, and(eq(memberships.benchId, benches.benchId), eq(memberships.userId, userId)))
    .where(eq(benches.benchId, benchId))
  return row && { kind: 'bench', benchId, itemId: benchId, ownerId: null, deleted: false, role: row.role }
}

export async function findScenarioScope(db: Handle, scenarioId: string, userId: string): Promise<Scope | undefined> {
  const [row] = await db.select({ benchId: scenarios.benchId, ownerId: scenarios.createdBy, deleted: sql<boolean>`${scenarios.deletedAt} is not null`, role: memberships.role })
    .from(scenarios).leftJoin(memberships, and(eq(memberships.benchId, scenarios.benchId), eq(memberships.userId, userId)))
    .where(and(eq(scenarios.scenarioId, scenarioId), isReachable(scenarios.deletedAt)))
  return row && { kind: 'scenario', itemId: scenarioId, ...row }
}

export async function findRunScope(db: Handle, runId: string, userId: string): Promise<Scope | undefined> {
  const [row] = await db.select({ benchId: runs.benchId, ownerId: runs.savedBy, deleted: sql<boolean>`${runs.deletedAt} is not null`, role: memberships.role })
    .from(runs).leftJoin(memberships, and(eq(memberships.benchId, runs.benchId), eq(memberships.userId, userId)))
    .where(and(eq(runs.runId, runId), isReachable(runs.deletedAt)))
  return row && { kind: 'run', itemId: runId, ...row }
}
