/** Writes what was done. Called inside the same transaction as the deed, so that neither stands without the other. */
import type { Handle } from '../db/client'
import { auditEvents, type AuditKind } from '../db/schema'

export interface AuditEntry {
  kind: AuditKind
  actorId: string | null
  benchId?: string | null
  scenarioId?: string | null
  revision?: number | null
  runId?: string | null
  recordingId?: string | null
  weighUpId?: string | null
  subjectId?: string | null
  note?: string
  at?: Date
}

export async function recordEvent(db: Handle, entry: AuditEntry): Promise<void> {
  await db.insert(auditEvents).values(entry)
}
