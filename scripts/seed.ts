/**
 * Writes the invented demo bench into an empty database, once: `npx tsx scripts/seed.ts`. NUXT_DATABASE_URL: the application's address.
 * Everything goes through the services that the server uses; the runs are really walked. An interrupted seed is taken up again.
 */
import { and, eq } from 'drizzle-orm'
import { DEMO_PASS_PHRASE, DEMO_PEOPLE, DEMO_BENCH, hashPassPhrase, type DemoPerson } from './demo'
import { seedRecordingsAndWeighUps } from './demo-recordings'
import { DEMO_STORY, type StoryRun, type StoryScenario } from './demo-story'
import { examineRun } from '../server/jobs/examine'
import { openDatabase, openPool, type Database } from '../server/db/client'
import { auditEvents, benches, scenarios } from '../server/db/schema'
import { recordEvent } from '../server/services/audit-trail'
import { addMember, createBench } from '../server/services/benches'
import { findAttempt, readRevisionDocument, storeRun } from '../server/services/run-save'
import { createScenario, saveScenario } from '../server/services/scenario-edits'
import type { Reader } from '../server/services/scenario-rows'
import { createUser, findUserByMail } from '../server/services/users'
import { blockDigest, outcomeDigest, scenarioDigest } from '../shared/walk/digest'
import { runInNode } from '../workers/node'

type People = Record<DemoPerson['key'], string>
/** Any fixed number: two starts at once do not seed twice. */
const LOCK = 7_310_552_027

async function seedPeople(db: Database): Promise<People> {
  const passHash = await hashPassPhrase(DEMO_PASS_PHRASE)
  const ids = {} as People
  for (const { key, mail, name } of DEMO_PEOPLE)
    ids[key] = (await findUserByMail(db, mail))?.userId ?? await createUser(db, { mail, name, passHash, demo: true, createdAt: daysAgo(40) })
  return ids
}

async function seedBench(db: Database, ids: People): Promise<string> {
  const [known] = await db.select({ benchId: benches.benchId }).from(benches).where(and(eq(benches.createdBy, ids.orla), eq(benches.name, DEMO_BENCH)))
  const benchId = known?.benchId ?? (await createBench(db, ids.orla, DEMO_BENCH, daysAgo(40))).benchId
  for (const { key, role } of DEMO_PEOPLE) await addMember(db, benchId, ids[key], role, daysAgo(39))
  return benchId
}

const daysAgo = (days: number) => new Date(Date.now() - days * 86_400_000)
const readerOf = (ids: People, benchId: string, key: DemoPerson['key']): Reader => ({ benchId, userId: ids[key], role: DEMO_PEOPLE.find(one => one.key === key)!.role })

/** Writes the revisions that are missing, in the order of the story. */
async function seedScenario(db: Database, ids: People, benchId: string, { tags, revisions }: StoryScenario): Promise<string> {
  const first = revisions[0]!, as = readerOf(ids, benchId, first.by)
  const [known] = await db.select({ scenarioId: scenarios.scenarioId, revision: scenarios.revision }).from(scenarios)
    .where(and(eq(scenarios.benchId, benchId), eq(scenarios.title, first.document.title), eq(scenarios.createdBy, as.userId)))
  const scenarioId = known?.scenarioId ?? (await createScenario(db, as, { document: first.document, message: first.message, tags: [...tags] }, daysAgo(first.daysAgo))).scenarioId
  for (const [i, one] of revisions.entries())
    if (i >= (known?.revision ?? 1)) await saveScenario(db, readerOf(ids, benchId, one.by), scenarioId, i, { document: one.document, message: one.message }, daysAgo(one.daysAgo))
  return scenarioId
}

async function seedRun(db: Database, ids: People, benchId: string, scenarioId: string, { by, revision, seed, replicates, daysAgo: days }: StoryRun) {
  const as = readerOf(ids, benchId, by), attempt = { key: `demo-${seed}`, bodyHash: seed }
  if (await findAttempt(db, as, scenarioId, attempt)) return
  const scenario = await readRevisionDocument(db, scenarioId, revision)
  const { engine, blocks, partial, durationMs, workers, landingError } = await runInNode({ scenario, seed, replicates, algorithm: 'auto' }, { workers: 2 })
  const blockDigests = blocks.map(blockDigest)
  const run = {
    revision, seed, engine, replicatesAsked: replicates, blocks, partial, durationMs, workers,
    digest: outcomeDigest({ scenarioDigest: scenarioDigest(scenario), engine, seed, replicates, blockDigests }),
  }
  await storeRun(db, as, scenarioId, attempt, { run, outcome: await examineRun(scenario, run, async () => landingError) }, daysAgo(days))
}

async function seedAll(db: Database): Promise<string> {
  const [done] = await db.select({ at: auditEvents.at }).from(auditEvents).where(eq(auditEvents.kind, 'demo-seeded')).limit(1)
  if (done) return 'The demo bench was written before.'
  const ids = await seedPeople(db)
  const benchId = await seedBench(db, ids)
  const written = new Map<StoryScenario['key'], string>()
  for (const scenario of DEMO_STORY.scenarios) written.set(scenario.key, await seedScenario(db, ids, benchId, scenario))
  for (const run of DEMO_STORY.runs) await seedRun(db, ids, benchId, written.get(run.scenario)!, run)
  const measured = await seedRecordingsAndWeighUps(db, readerOf(ids, benchId, 'tomasz'))
  await recordEvent(db, { kind: 'demo-seeded', actorId: null, benchId })
  return `Wrote the invented ${DEMO_BENCH}: ${DEMO_STORY.scenarios.length} scenarios, ${DEMO_STORY.runs.length} runs, ${measured}.`
}

const address = process.env.NUXT_DATABASE_URL ?? process.env.DATABASE_URL
if (!address) {
  console.error('Set NUXT_DATABASE_URL to the address of the database.')
  process.exit(2)
}
const pool = openPool(address, 4)
const lock = await pool.connect()
try {
  await lock.query('select pg_advisory_lock($1)', [LOCK])
  console.log(await seedAll(openDatabase(pool)))
} catch (error) {
  console.error(error instanceof Error ? error.stack : error)
  process.exitCode = 1
} finally {
  lock.release(true)
  await pool.end()
}
