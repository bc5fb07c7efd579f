/** Where a thing belongs and what the person is there: one query for each kind of path. */
import { and, eq, sql } from 'drizzle-orm'
import { isReachable } from '../db/bin'
import type { Handle } from '../db/client'
import { benches, memberships, recordings, runs, scenarios, weighUps } from '../db/schema'
import type { Role } from '../../shared/permissions'

export interface Scope {
  kind: 'bench' | 'scenario' | 'run' | 'recording' | 'weigh-up'
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

/** Tables whose rows belong to a bench, are made by someone and can lie in the bin. */
export const ITEMS = {
  'scenario': { table: scenarios, id: scenarios.scenarioId, owner: scenarios.createdBy },
  'run': { table: runs, id: runs.runId, owner: runs.savedBy },
  'recording': { table: recordings, id: recordings.recordingId, owner: recordings.createdBy },
  'weigh-up': { table: weighUps, id: weighUps.weighUpId, owner: weighUps.createdBy },
} as const
export type ItemKind = keyof typeof ITEMS

export async function findItemScope(db: Handle, kind: ItemKind, itemId: string, userId: string): Promise<Scope | undefined> {
  const { table, id, owner } = ITEMS[kind]
  const [row] = await db.select({ benchId: table.benchId, ownerId: owner, deleted: sql<boolean>`${table.deletedAt} is not null`, role: memberships.role })
    .from(table).leftJoin(memberships, and(eq(memberships.benchId, table.benchId), eq(memberships.userId, userId)))
    .where(and(eq(id, itemId), isReachable(table.deletedAt)))
  return row && { kind, itemId, ...row }
}
