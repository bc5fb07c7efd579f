/** A bench with one person in each role, a stranger with a bench of their own, and a scenario on each. */
import type { ProvidedContext } from 'vitest'
import type { Role } from '../../shared/permissions'
import type { ScenarioInput } from '../../shared/schemas/scenario'
import type { Bench } from '../../shared/schemas/api/bench'
import type { ScenarioDetail } from '../../shared/schemas/api/scenario'
import { cloneDatabase, type TestDatabase } from './database'
import { startServer, type TestServer } from './server'
import { arrive, Visitor } from './visitor'

/** Small enough that a run takes milliseconds. */
export const SMALL: ScenarioInput = {
  format: 'moorage-scenario', version: 1, title: 'Small and stirred',
  medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' },
  ribbon: { shape: 'plate', rows: 2, columns: 3, faces: 2, classLayout: 'interleaved' },
  reservoir: { supply: 'stirred' },
  sites: [{ name: 'quick', share: 0.5, attachProbability: 0.3 }, { name: 'reluctant', share: 0.5, attachProbability: 0.05 }],
  vesicles: [{ name: 'vesicle', share: 1 }],
  schedule: { durationS: 4, sampleEveryMs: 100, initialFill: 0.1 },
}

export interface World { database: TestDatabase, server: TestServer, end: () => Promise<void> }
export async function openWorld(cluster: ProvidedContext['cluster'], settings?: Record<string, string>): Promise<World> {
  const database = await cloneDatabase(cluster)
  const server = await startServer(database.applicationUrl, settings).catch(async (error) => {
    await database.drop()
    throw error
  })
  return {
    database, server,
    async end() {
      await server.stop()
      await database.drop()
    },
  }
}

export async function makeBench(world: World, lead: Visitor, name = 'North pier'): Promise<string> {
  return (await lead.post<Bench>('/api/benches', { name })).body.benchId
}
export async function makeScenario(who: Visitor, benchId: string, change: Partial<ScenarioInput> = {}): Promise<ScenarioDetail> {
  const answer = await who.post<ScenarioDetail>(`/api/benches/${benchId}/scenarios`, { document: { ...SMALL, ...change } })
  if (answer.status !== 201) throw new Error(`makeScenario: ${answer.status} ${JSON.stringify(answer.body)}`)
  return answer.body
}

export type Everyone = Record<Role | 'stranger' | 'signedOut', Visitor>
/** One person in each role on a new bench. */
export async function everyone(world: World): Promise<{ people: Everyone, benchId: string, otherBenchId: string }> {
  const { db } = world.database
  const { base } = world.server
  const lead = await arrive(db, base, 'Lead Person'), stranger = await arrive(db, base, 'Stranger Person')
  const benchId = await makeBench(world, lead), otherBenchId = await makeBench(world, stranger, 'South pier')
  const [member, trainee, guest] = await Promise.all((['member', 'trainee', 'guest'] as const).map(role => arrive(db, base, `${role} Person`, { benchId, role })))
  return { people: { lead, member: member!, trainee: trainee!, guest: guest!, stranger, signedOut: new Visitor(base) }, benchId, otherBenchId }
}
