/**
 * Brings a database up to this version: `npx tsx scripts/migrate.ts`.
 * MOORAGE_OWNER_URL: the owner's address (else DATABASE_URL, else NUXT_DATABASE_URL) · MOORAGE_APP_ROLE: role that gets row rights.
 * Exit 0 done, 2 the database is newer than this program, 1 fault.
 */
import { fileURLToPath } from 'node:url'
import { migrateDatabase, NewerDatabaseError } from '../server/db/migrate'

const ownerUrl = process.env.MOORAGE_OWNER_URL ?? process.env.DATABASE_URL ?? process.env.NUXT_DATABASE_URL
if (!ownerUrl) {
  console.error('Set MOORAGE_OWNER_URL to the address of the database, e.g. postgresql://owner:…@127.0.0.1:5432/moorage.')
  process.exit(2)
}
try {
  const folder = fileURLToPath(new URL('../drizzle', import.meta.url))
  const applied = await migrateDatabase({ ownerUrl, folder, applicationRole: process.env.MOORAGE_APP_ROLE || undefined })
  console.log(applied === 0 ? 'Database is up to date.' : `Applied ${applied} migration${applied === 1 ? '' : 's'}.`)
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(error instanceof NewerDatabaseError ? 2 : 1)
}
