// What the database itself keeps: immutable rows, the application's rights, migrations that only go forward.
import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { APPLICATION_ROLE } from '../../scripts/support/roles.mjs'
import { migrateDatabase, NewerDatabaseError } from '../../server/db/migrate'
import { makeBench, makeScenario, openWorld, SMALL, type World } from '../support/bench'
import { MIGRATIONS } from '../support/postgres'
import { runBody } from '../support/runs'
import { arrive } from '../support/visitor'

let world: World
/** One statement in a connection of its own, as a role. */
async function say(connectionString: string, statement: string) {
  const client = new pg.Client({ connectionString })
  await client.connect()
  try {
    return await client.query(statement)
  } finally {
    await client.end()
  }
}
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  const lead = await arrive(world.database.db, world.server.base, 'Keeper')
  const { scenarioId } = await makeScenario(lead, await makeBench(world, lead))
  const { status } = await lead.post(`/api/scenarios/${scenarioId}/runs`, await runBody(SMALL), { 'idempotency-key': 'guard' })
  expect(status).toBe(201)
})
afterAll(() => world?.end())

const CHANGES = [
  'update scenario_revisions set message = \'forged\'', 'delete from scenario_revisions', 'truncate scenario_revisions cascade',
  'update run_blocks set digest = digest', 'delete from run_blocks', 'truncate run_blocks',
  'update audit_events set note = \'forged\'', 'delete from audit_events', 'truncate audit_events',
  'update runs set seed = \'other\'', 'update runs set outcome = \'{}\'', 'update runs set digest = repeat(\'0\', 64)', 'delete from runs', 'truncate runs cascade',
  'truncate uploads cascade', 'truncate fits', 'truncate weigh_up_versions', 'truncate recording_points',
]
describe.each([['the application', 'applicationUrl'], ['the owner', 'ownerUrl'], ['the superuser', 'superUrl']] as const)('%s', (_, url) => {
  it.each(CHANGES)('cannot %s', async (statement) => {
    const code = await say(world.database[url], statement).then(() => 'done', (error: { code: string }) => error.code)
    // Refused by the rights of the role (42501), else by the triggers (23001).
    expect(url === 'applicationUrl' ? ['42501'] : ['23001']).toContain(code)
  })
})

describe('the application\'s role', () => {
  it('may bin and audit a run and nothing else of it', async () => {
    const changes = ['audit_state = audit_state, audit_detection = audit_detection, deleted_at = now(), deleted_by = saved_by', 'deleted_at = null, deleted_by = null']
    for (const change of changes) expect((await say(world.database.applicationUrl, `update runs set ${change}`)).rowCount).toBe(1)
  })
  it.each(['create table mine (a int)', 'alter table users add column x int', 'drop table tags', 'create role other', 'alter table runs disable trigger all', 'set role moorage_owner', 'create schema mine', 'delete from drizzle.__drizzle_migrations', 'create temp table t (a int)'])('cannot %s', async (statement) => {
    await expect(say(world.database.applicationUrl, statement)).rejects.toMatchObject({ code: expect.stringMatching(/^(42501|3F000)$/) })
  })
})

describe('the tables', () => {
  it.each([
    ['a role that is none', 'update memberships set role = \'owner\''],
    ['a mail in capitals', 'update users set mail = \'A@B.example\''],
    ['a scenario of nobody', 'update scenarios set created_by = gen_random_uuid()'],
    ['a deletion without a deleter', 'update scenarios set deleted_at = now()'],
    ['a title of nothing', 'update scenarios set title = \'\''],
    ['a negative count', 'update benches set runs_numbered = -1'],
  ])('refuse %s', async (_, statement) => {
    await expect(say(world.database.superUrl, statement)).rejects.toMatchObject({ code: expect.stringMatching(/^23/) })
  })
  it('keep all times with time zone', async () => {
    const rows = await world.database.ask<{ data_type: string }>('select distinct data_type from information_schema.columns where table_schema = \'public\' and data_type like \'timestamp%\'')
    expect(rows).toEqual([{ data_type: 'timestamp with time zone' }])
  })
})

describe('migrating', () => {
  const migrate = (folder: string) => migrateDatabase({ ownerUrl: world.database.ownerUrl, folder, applicationRole: APPLICATION_ROLE })
  it('twice, and by several processes at once, changes nothing', async () => {
    expect(await migrate(MIGRATIONS)).toBe(0)
    expect(await Promise.all([migrate(MIGRATIONS), migrate(MIGRATIONS), migrate(MIGRATIONS)])).toEqual([0, 0, 0])
  })
  it('refuses a database of a newer version, and goes forward with a migration more', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'moorage-migrations-'))
    try {
      cpSync(MIGRATIONS, folder, { recursive: true })
      const journalPath = join(folder, 'meta/_journal.json')
      const journal = JSON.parse(readFileSync(journalPath, 'utf8')) as { entries: { idx: number, when: number, tag: string, version: string, breakpoints: boolean }[] }
      const last = journal.entries.at(-1)!
      journal.entries.push({ ...last, idx: last.idx + 1, when: last.when + 1000, tag: '9999_of_the_future' })
      writeFileSync(journalPath, JSON.stringify(journal))
      writeFileSync(join(folder, '9999_of_the_future.sql'), 'CREATE TABLE of_the_future (a integer);')
      expect(await migrate(folder)).toBe(1)
      expect(await world.database.ask('select has_table_privilege($1, \'of_the_future\', \'insert\') as may', [APPLICATION_ROLE])).toEqual([{ may: true }])
      await expect(migrate(MIGRATIONS)).rejects.toThrow(NewerDatabaseError)
    } finally {
      rmSync(folder, { recursive: true, force: true })
    }
  })
})
