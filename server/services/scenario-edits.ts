/** Making and changing scenarios. Every saved change is a new, immutable revision; nobody's edit is overwritten. */
import { and, eq, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Database, Handle } from '../db/client'
import { scenarioRevisions, scenarios, tags, users } from '../db/schema'
import type { ScenarioCreateSchema, ScenarioDetail, StaleEdit } from '../../shared/schemas/api/scenario'
import type { Scenario } from '../../shared/schemas/scenario'
import { canonicalText } from '../../shared/walk/canonical'
import { scenarioDigest } from '../../shared/walk/digest'
import { problem } from '../utils/problem'
import { recordEvent } from './audit-trail'
import { binItem, unbinItem } from './item-bin'
import { describeScenario, type Reader } from './scenario-rows'

export type ScenarioEdit = z.output<typeof ScenarioCreateSchema>

async function insertRevision(tx: Handle, scenarioId: string, revision: number, authorId: string, edit: { document: Scenario, message: string }, savedAt: Date) {
  await tx.insert(scenarioRevisions).values({ scenarioId, revision, authorId, message: edit.message, document: edit.document, digest: scenarioDigest(edit.document), savedAt })
}
async function replaceTags(tx: Handle, scenarioId: string, wanted: string[]) {
  await tx.delete(tags).where(eq(tags.scenarioId, scenarioId))
  const unique = [...new Set(wanted)]
  if (unique.length) await tx.insert(tags).values(unique.map(tag => ({ scenarioId, tag })))
}

export async function createScenario(db: Database, reader: Reader, edit: ScenarioEdit, at = new Date()): Promise<ScenarioDetail> {
  return db.transaction(async (tx) => {
    const [made] = await tx.insert(scenarios).values({
      benchId: reader.benchId, title: edit.document.title, revision: 1, createdBy: reader.userId, updatedBy: reader.userId, createdAt: at, updatedAt: at,
    }).returning({ scenarioId: scenarios.scenarioId })
    const { scenarioId } = made!
    await insertRevision(tx, scenarioId, 1, reader.userId, edit, at)
    await replaceTags(tx, scenarioId, edit.tags)
    await recordEvent(tx, { kind: 'scenario-created', actorId: reader.userId, benchId: reader.benchId, scenarioId, revision: 1, at })
    return describeScenario(tx, reader, scenarioId)
  })
}

/** Locks the scenario's head and refuses an edit that was not made from it: 412 with who saved and when. */
async function lockHead(tx: Handle, scenarioId: string, revision: number): Promise<Scenario> {
  const [head] = await tx.select({ revision: scenarios.revision, deletedAt: scenarios.deletedAt }).from(scenarios).where(eq(scenarios.scenarioId, scenarioId)).for('update')
  if (!head || head.deletedAt) throw problem('not_found')
  const [newest] = await tx.select({ document: scenarioRevisions.document, savedAt: scenarioRevisions.savedAt, author: users.name })
    .from(scenarioRevisions).innerJoin(users, eq(users.userId, scenarioRevisions.authorId))
    .where(and(eq(scenarioRevisions.scenarioId, scenarioId), eq(scenarioRevisions.revision, head.revision)))
  if (head.revision !== revision) {
    const current: StaleEdit = { revision: head.revision, author: newest!.author, savedAt: newest!.savedAt.toISOString() }
    throw problem('moved_on', { current, detail: `${current.author} saved revision ${current.revision} in the meantime.` })
  }
  return newest!.document
}

/** An unchanged document makes no new revision; its tags are taken over all the same. */
export async function saveScenario(db: Database, reader: Reader, scenarioId: string, from: number, edit: Omit<ScenarioEdit, 'tags'> & { tags?: string[] }, at = new Date()): Promise<ScenarioDetail> {
  return db.transaction(async (tx) => {
    const before = await lockHead(tx, scenarioId, from)
    if (canonicalText(before) !== canonicalText(edit.document)) {
      await insertRevision(tx, scenarioId, from + 1, reader.userId, edit, at)
      await tx.update(scenarios).set({ title: edit.document.title, revision: from + 1, updatedBy: reader.userId, updatedAt: at }).where(eq(scenarios.scenarioId, scenarioId))
      await recordEvent(tx, { kind: 'revision-saved', actorId: reader.userId, benchId: reader.benchId, scenarioId, revision: from + 1, at })
    }
    if (edit.tags) await replaceTags(tx, scenarioId, edit.tags)
    return describeScenario(tx, reader, scenarioId)
  })
}

export async function setTags(db: Database, reader: Reader, scenarioId: string, wanted: string[]): Promise<ScenarioDetail> {
  return db.transaction(async (tx) => {
    await tx.execute(sql`select 1 from scenarios where scenario_id = ${scenarioId} for update`)
    await replaceTags(tx, scenarioId, wanted)
    return describeScenario(tx, reader, scenarioId)
  })
}

/** A copy starts its own history with one revision that says where it came from. */
export async function duplicateScenario(db: Database, reader: Reader, scenarioId: string, title?: string): Promise<ScenarioDetail> {
  const source = await describeScenario(db, reader, scenarioId)
  const named = title ?? `${source.title.slice(0, 193)} (copy)`
  return createScenario(db, reader, {
    document: { ...source.document, title: named }, tags: source.tags, message: `Copied from “${source.title}”, revision ${source.revision}.`,
  })
}

/** Puts into the bin, from where it can be taken back. */
export const binScenario = (db: Database, reader: Reader, scenarioId: string) => db.transaction(tx => binItem(tx, reader, 'scenario', scenarioId))
export const unbinScenario = (db: Database, reader: Reader, scenarioId: string) => db.transaction(async (tx) => {
  await unbinItem(tx, reader, 'scenario', scenarioId)
  return describeScenario(tx, reader, scenarioId)
})
