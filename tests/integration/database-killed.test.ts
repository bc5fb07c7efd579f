// The database is killed ten times while runs are being saved. What was acknowledged is there; meanwhile 503; afterwards it recovers by itself.
import { setTimeout as pause } from 'node:timers/promises'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { killCluster, startCluster } from '../../scripts/support/cluster.mjs'
import { makeBench, makeScenario, SMALL } from '../support/bench'
import { cloneDatabase, type TestDatabase } from '../support/database'
import { makeCluster } from '../support/postgres'
import { runBody } from '../support/runs'
import { startServer, type TestServer } from '../support/server'
import { arrive, type Visitor } from '../support/visitor'

const KILLS = 10
const WRITERS = 3
let cluster: Awaited<ReturnType<typeof makeCluster>>, database: TestDatabase, server: TestServer, lead: Visitor, path: string
beforeAll(async () => {
  // A cluster of its own, durable as in use: nothing is switched off.
  cluster = await makeCluster({ durable: true })
  database = await cloneDatabase(cluster)
  server = await startServer(database.applicationUrl)
  lead = await arrive(database.db, server.base, 'Saver')
  path = `/api/scenarios/${(await makeScenario(lead, await makeBench({ database, server, end: async () => {} }, lead))).scenarioId}/runs`
})
afterAll(async () => {
  await server?.stop()
  // After a failure the cluster may be down; its folder goes in any case.
  await database?.drop().catch(() => {})
  cluster?.end()
})

it('loses no acknowledged run in ten kills, answers 503 in between, and recovers by itself', async () => {
  const body = JSON.stringify(await runBody(SMALL, { replicates: 20 }))
  const acknowledged = new Map<string, string>()
  const unsure = new Set<string>()
  const statuses = new Map<number, number>()
  let going = true, count = 0
  const trySave = async (key: string) => {
    const { status, body: run } = await lead.post<{ runId: string }>(path, body, { 'idempotency-key': key })
    statuses.set(status, (statuses.get(status) ?? 0) + 1)
    if (status === 201 || status === 200) {
      acknowledged.set(key, run.runId)
      unsure.delete(key)
    } else {
      unsure.add(key)
    }
  }
  const writers = Array.from({ length: WRITERS }, async () => {
    while (going) {
      await trySave(`save-${count += 1}`)
      await pause(5)
    }
  })
  try {
    for (let kill = 0; kill < KILLS; kill += 1) {
      const before = acknowledged.size
      for (let i = 0; i < 600 && acknowledged.size < before + 3; i += 1) await pause(50)
      expect(acknowledged.size, `saving went on before kill ${kill + 1}; answers so far ${JSON.stringify([...statuses])}`).toBeGreaterThan(before)
      await pause(Math.random() * 40)
      await killCluster(cluster.folder)
      // A back end may outlive its postmaster by a moment, and answers truthfully until then.
      let health = await lead.get<{ code: string }>('/api/health')
      for (let i = 0; i < 100 && health.status === 200; i += 1) {
        await pause(50)
        health = await lead.get<{ code: string }>('/api/health')
      }
      expect([health.status, health.body.code]).toEqual([503, 'database_away'])
      expect(Number(health.headers.get('retry-after'))).toBeGreaterThan(0)
      await startCluster(cluster.folder, { port: cluster.port, durable: true })
    }
  } finally {
    going = false
    await Promise.all(writers)
  }
  for (let i = 0; i < 100 && (await lead.get('/api/health')).status !== 200; i += 1) await pause(100)
  expect((await lead.get('/api/account/me')).status).toBe(200)

  expect([...statuses.keys()].filter(status => ![200, 201, 503].includes(status)), JSON.stringify([...statuses])).toEqual([])
  const stored = new Set((await database.ask<{ run_id: string }>('select run_id from runs')).map(row => row.run_id))
  expect([...acknowledged.values()].filter(id => !stored.has(id))).toEqual([])
  // What got no answer is sent again under its key, as a browser does; then both sides are the same, with no second run and no half one.
  for (const key of [...unsure]) await trySave(key)
  const rows = await database.ask<{ run_id: string, whole: boolean }>('select run_id, (select count(*) from run_blocks where run_blocks.run_id = runs.run_id) = blocks as whole from runs')
  expect(rows.map(row => row.run_id).sort()).toEqual([...acknowledged.values()].sort())
  expect(rows.every(row => row.whole)).toBe(true)
  console.log(`${KILLS} kills: ${acknowledged.size} runs acknowledged and stored; answers ${JSON.stringify(Object.fromEntries(statuses))}`)
}, 420_000)
