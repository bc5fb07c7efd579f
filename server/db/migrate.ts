/** Applies migrations as the owner, forward only, one process at a time, and gives the application's role its rights. */
import { drizzle } from 'drizzle-orm/node-postgres'
import { readMigrationFiles } from 'drizzle-orm/migrator'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'
import { grantsFor } from './grants'

/** Any fixed number serves, as long as every copy of the program uses the same. */
const LOCK = 7_310_552_026

export interface MigrateOptions {
  /** Address of the database as the role that owns its tables. */
  ownerUrl: string
  /** Folder with the numbered SQL files and meta/_journal.json. */
  folder: string
  /** Role that the application signs in as; none: the owner's own. */
  applicationRole?: string
}

export class NewerDatabaseError extends Error {
  constructor(applied: number, known: number) {
    super(`This database was migrated by a newer version of Moorage (${applied} migrations applied, ${known} known here). Start that version, or restore a backup made before it.`)
    this.name = 'NewerDatabaseError'
  }
}

/** Hashes of the migrations that the database says were applied; empty before the first. */
async function appliedHashes(client: pg.Client): Promise<string[]> {
  const found = await client.query<{ known: string | null }>('select to_regclass(\'drizzle.__drizzle_migrations\')::text as known')
  if (!found.rows[0]?.known) return []
  const applied = await client.query<{ hash: string }>('select hash from drizzle.__drizzle_migrations order by created_at')
  return applied.rows.map(row => row.hash)
}

/** @returns how many migrations were applied now */
export async function migrateDatabase(options: MigrateOptions): Promise<number> {
  const known = new Set(readMigrationFiles({ migrationsFolder: options.folder }).map(file => file.hash))
  const client = new pg.Client({ connectionString: options.ownerUrl, application_name: 'moorage-migrate' })
  await client.connect()
  try {
    await client.query('select pg_advisory_lock($1)', [LOCK])
    const before = await appliedHashes(client)
    if (before.some(hash => !known.has(hash))) throw new NewerDatabaseError(before.length, known.size)
    await migrate(drizzle(client), { migrationsFolder: options.folder })
    if (options.applicationRole) await client.query(grantsFor(options.applicationRole))
    return known.size - before.length
  } finally {
    await client.end()
  }
}
