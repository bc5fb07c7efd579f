/** One pool a process. Services take the handle as an argument, so that scripts and tests use them with their own. */
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import * as schema from './schema'

export type Database = NodePgDatabase<typeof schema>
/** What a service may be given: the pool's handle or a transaction. */
export type Handle = Database | Parameters<Parameters<Database['transaction']>[0]>[0]

/** Waits are bounded, so that a database that went away answers 503 within seconds and never hangs a request. */
export function openPool(connectionString: string, most = 10): pg.Pool {
  const pool = new pg.Pool({
    connectionString, max: most, connectionTimeoutMillis: 4000, idleTimeoutMillis: 30_000,
    statement_timeout: 20_000, query_timeout: 25_000, keepAlive: true, application_name: 'moorage',
  })
  // A connection that breaks while idle, or between two statements of a transaction, is an event; without a listener it would end the process.
  // The statement under way or the next one is told, and the pool drops the connection.
  pool.on('error', () => {})
  pool.on('connect', client => client.on('error', () => {}))
  return pool
}
export const openDatabase = (pool: pg.Pool): Database => drizzle(pool, { schema })
