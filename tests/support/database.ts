/** A database of a test file's own, cloned from the migrated template in about a tenth of a second. */
import pg from 'pg'
import { addressOf, SUPERUSER } from '../../scripts/support/cluster.mjs'
import { APPLICATION_ROLE, OWNER_ROLE } from '../../scripts/support/roles.mjs'
import { openDatabase, openPool, type Database } from '../../server/db/client'
import { TEMPLATE, type ClusterAccess } from './postgres'

export interface TestDatabase {
  name: string
  ownerUrl: string
  applicationUrl: string
  superUrl: string
  /** As the application's role. */
  db: Database
  /** One statement as the superuser. */
  ask: <Row extends object>(statement: string, parameters?: unknown[]) => Promise<Row[]>
  drop: () => Promise<void>
}
let count = 0

async function asSuperuser<T>(superUrl: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: superUrl })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}

export async function cloneDatabase(cluster: ClusterAccess): Promise<TestDatabase> {
  count += 1
  const name = `t_${process.pid}_${Date.now().toString(36)}_${count}`
  const url = (user: string, password: string, database = name) => addressOf({ port: cluster.port, user, password, database })
  const adminUrl = url(SUPERUSER, cluster.superPassword, 'postgres')
  await asSuperuser(adminUrl, async (client) => {
    await client.query(`create database ${name} template ${TEMPLATE} owner ${OWNER_ROLE}`)
    // Rights of a database itself are not copied from a template.
    await client.query(`revoke all on database ${name} from public`)
    await client.query(`grant connect on database ${name} to ${APPLICATION_ROLE}`)
  })
  const superUrl = url(SUPERUSER, cluster.superPassword)
  const applicationUrl = url(APPLICATION_ROLE, cluster.applicationPassword)
  const pool = openPool(applicationUrl, 4)
  return {
    name, superUrl, applicationUrl, ownerUrl: url(OWNER_ROLE, cluster.ownerPassword), db: openDatabase(pool),
    ask: (statement, parameters = []) => asSuperuser(superUrl, async client => (await client.query(statement, parameters)).rows),
    async drop() {
      await pool.end()
      await asSuperuser(adminUrl, client => client.query(`drop database if exists ${name} with (force)`))
    },
  }
}
