// An unknown address and a wrong pass phrase are answered alike, and as fast. At the product's own cost of hashing.
import { afterAll, beforeAll, expect, inject, it } from 'vitest'
import { users } from '../../server/db/schema'
import { openWorld, type World } from '../support/bench'
import { PASS_PHRASE, quickHash, Visitor } from '../support/visitor'

const COST = 131_072
const PAIRS = 50
let world: World
beforeAll(async () => {
  world = await openWorld(inject('cluster'), { NUXT_HASH_SCRYPT_COST: String(COST) })
  await world.database.db.insert(users).values({ mail: 'known@tests.example', name: 'Known', passHash: quickHash(PASS_PHRASE, COST) })
})
afterAll(() => world?.end())

const median = (values: number[]) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)]!

it('hashes pass phrases at N = 2^17, r = 8, p = 1', async () => {
  const visitor = new Visitor(world.server.base)
  expect((await visitor.post('/api/account/register', { mail: 'new@tests.example', name: 'New', passPhrase: PASS_PHRASE })).status).toBe(201)
  const [row] = await world.database.ask<{ pass_hash: string }>('select pass_hash from users where mail = \'new@tests.example\'')
  expect(row!.pass_hash).toMatch(/^\$scrypt\$n=131072,r=8,p=1\$/)
  expect((await new Visitor(world.server.base).signIn('new@tests.example')).status).toBe(200)
})

it('raises a hash of lower cost at the next sign-in', async () => {
  await world.database.db.insert(users).values({ mail: 'old@tests.example', name: 'Old', passHash: quickHash(PASS_PHRASE, 1024) })
  expect((await new Visitor(world.server.base).signIn('old@tests.example')).status).toBe(200)
  const [row] = await world.database.ask<{ pass_hash: string }>('select pass_hash from users where mail = \'old@tests.example\'')
  expect(row!.pass_hash).toMatch(/^\$scrypt\$n=131072,/)
  expect((await new Visitor(world.server.base).signIn('old@tests.example')).status).toBe(200)
})

it('takes the same time class and gives the same answer, medians of 50 each within 20 %', async () => {
  const times = { known: [] as number[], unknown: [] as number[] }
  const bodies = new Set<string>()
  const attempt = async (kind: 'known' | 'unknown', i: number) => {
    const started = performance.now()
    const { status, body, headers } = await new Visitor(world.server.base).signIn(kind === 'known' ? 'known@tests.example' : `unknown-${i}@tests.example`, `not the phrase ${i}`)
    times[kind].push(performance.now() - started)
    bodies.add(JSON.stringify([status, body, [...headers].filter(([name]) => name !== 'date')]))
  }
  // Alternating, so that a busy machine slows both alike.
  for (let i = 0; i < PAIRS; i += 1) {
    await attempt(i % 2 ? 'known' : 'unknown', i)
    await attempt(i % 2 ? 'unknown' : 'known', i)
  }
  expect(bodies.size).toBe(1)
  const [known, unknown] = [median(times.known), median(times.unknown)]
  console.log(`sign-in refused: known ${known.toFixed(1)} ms, unknown ${unknown.toFixed(1)} ms, ratio ${(known / unknown).toFixed(3)}`)
  expect(known / unknown).toBeGreaterThan(0.8)
  expect(known / unknown).toBeLessThan(1.2)
  expect(Math.min(known, unknown)).toBeGreaterThan(50)
}, 300_000)
