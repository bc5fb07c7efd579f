/** In and out of the bin, for whatever lies there: one place decides who waits, what is refused and what is written down. */
import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import type { Handle } from '../db/client'
import { problem } from '../utils/problem'
import { recordEvent, type AuditEntry } from './audit-trail'
import type { Reader } from './scenario-rows'
import { ITEMS, type ItemKind } from './scopes'

const NAMES = { 'scenario': 'scenarioId', 'run': 'runId', 'recording': 'recordingId', 'weigh-up': 'weighUpId' } as const satisfies Record<ItemKind, keyof AuditEntry>

/** Puts an item into the bin; refuses one that lies there or never was. `about`: what else the audit trail says of it. */
export async function binItem(tx: Handle, reader: Reader, kind: ItemKind, itemId: string, about: Partial<AuditEntry> = {}): Promise<void> {
  const { table, id } = ITEMS[kind]
  const done = await tx.update(table).set({ deletedAt: sql`now()`, deletedBy: reader.userId }).where(and(eq(id, itemId), isNull(table.deletedAt))).returning({ benchId: table.benchId })
  if (!done.length) throw problem('not_found')
  await recordEvent(tx, { kind: `${kind}-binned`, actorId: reader.userId, benchId: reader.benchId, [NAMES[kind]]: itemId, ...about })
}

/** Takes an item out of the bin; one that is not there stays as it is. */
export async function unbinItem(tx: Handle, reader: Reader, kind: ItemKind, itemId: string, about: Partial<AuditEntry> = {}): Promise<void> {
  const { table, id } = ITEMS[kind]
  const done = await tx.update(table).set({ deletedAt: null, deletedBy: null }).where(and(eq(id, itemId), isNotNull(table.deletedAt))).returning({ benchId: table.benchId })
  if (done.length) await recordEvent(tx, { kind: `${kind}-restored`, actorId: reader.userId, benchId: reader.benchId, [NAMES[kind]]: itemId, ...about })
}
