/** Set-up of the suites that need a database: a throw-away cluster with a migrated template, which every test file clones. */
import { mkdtempSync, chmodSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import type { TestProject } from 'vitest/node'
import { initCluster, randomSecret, startCluster, stopCluster } from '../../scripts/support/cluster.mjs'
import { APPLICATION_ROLE, prepareDatabase } from '../../scripts/support/roles.mjs'
import { migrateDatabase } from '../../server/db/migrate'

export interface ClusterAccess { folder: string, port: number, superPassword: string, ownerPassword: string, applicationPassword: string }
declare module 'vitest' {
  interface ProvidedContext { cluster: ClusterAccess }
}

export const MIGRATIONS = fileURLToPath(new URL('../../drizzle', import.meta.url))
export const TEMPLATE = 'moorage_template'

/** A cluster in a folder of its own; parents are opened, as the database's account must reach it. */
export async function makeCluster(options: { durable: boolean }): Promise<ClusterAccess & { end: () => void }> {
  const parent = mkdtempSync(join(tmpdir(), 'moorage-test-'))
  chmodSync(parent, 0o755)
  const folder = join(parent, 'cluster')
  const secrets = { superPassword: randomSecret(), ownerPassword: randomSecret(), applicationPassword: randomSecret() }
  initCluster(folder, { password: secrets.superPassword, durable: options.durable })
  const { port } = await startCluster(folder, { durable: options.durable })
  const end = () => {
    stopCluster(folder, 'immediate')
    rmSync(parent, { recursive: true, force: true })
  }
  try {
    const { ownerUrl } = await prepareDatabase({ port, ...secrets, database: TEMPLATE })
    await migrateDatabase({ ownerUrl, folder: MIGRATIONS, applicationRole: APPLICATION_ROLE })
  } catch (error) {
    end()
    throw error
  }
  return { folder, port, ...secrets, end }
}

/** Two projects name this set-up; one cluster serves both, and the last one out ends it. */
const shared = globalThis as { moorageCluster?: { made: ReturnType<typeof makeCluster>, users: number } }

export default async function setup(project: TestProject) {
  const cluster = shared.moorageCluster ??= { made: makeCluster({ durable: false }), users: 0 }
  cluster.users += 1
  const { end, ...access } = await cluster.made
  project.provide('cluster', access)
  return () => {
    cluster.users -= 1
    if (cluster.users > 0) return
    shared.moorageCluster = undefined
    end()
  }
}
