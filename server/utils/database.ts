/** The process's pool, opened at the first use. */
import type pg from 'pg'
import { openDatabase, openPool, type Database } from '../db/client'

let pool: pg.Pool | undefined
let database: Database | undefined

export function useDatabase(): Database {
  if (database) return database
  const { databaseUrl } = useRuntimeConfig()
  if (!databaseUrl) throw problem('database_away', { detail: 'No database is set: NUXT_DATABASE_URL is empty.' })
  pool = openPool(databaseUrl)
  database = openDatabase(pool)
  return database
}

/** Ends the pool at shutdown. */
export async function closeDatabase(): Promise<void> {
  await pool?.end()
  pool = database = undefined
}
