// Attempts are counted per account and per address: first slowed, then refused with Retry-After, never for good.
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { users } from '../../server/db/schema'
import type { Problem } from '../../shared/schemas/problem'
import { openWorld, type World } from '../support/bench'
import { startServer } from '../support/server'
import { PASS_PHRASE, quickHash, Visitor } from '../support/visitor'

const SLOW_MS = 150
const LIMITS = { NUXT_THROTTLE_PER_ACCOUNT: '3', NUXT_THROTTLE_PER_ADDRESS: '12', NUXT_THROTTLE_REFUSE_AFTER: '15', NUXT_THROTTLE_SLOW_MILLISECONDS: String(SLOW_MS), NUXT_THROTTLE_WINDOW_SECONDS: '4' }
let world: World
beforeAll(async () => {
  world = await openWorld(inject('cluster'), LIMITS)
  await world.database.db.insert(users).values(['slowed', 'right', 'refused'].map(name => ({ mail: `${name}@tests.example`, name, passHash: quickHash(PASS_PHRASE) })))
})
afterAll(() => world?.end())

async function attempt(mail: string, passPhrase = 'wrong wrong wrong wrong') {
  const started = performance.now()
  const { status, headers, body } = await new Visitor(world.server.base).post<Problem>('/api/account/sign-in', { mail, passPhrase })
  return { status, ms: performance.now() - started, retryAfter: headers.get('retry-after'), body }
}
const clear = () => world.database.ask('delete from throttles')

describe('an account', () => {
  it('is slowed after its free attempts, with the same answer, and a right phrase clears the count', async () => {
    await clear()
    const free = [await attempt('slowed@tests.example'), await attempt('slowed@tests.example'), await attempt('slowed@tests.example')]
    const slowed = [await attempt('slowed@tests.example'), await attempt('slowed@tests.example')]
    expect([...free, ...slowed].map(one => one.status)).toEqual([401, 401, 401, 401, 401])
    expect(slowed[0]!.ms).toBeGreaterThanOrEqual(SLOW_MS)
    expect(slowed[1]!.ms).toBeGreaterThanOrEqual(2 * SLOW_MS)
    expect(slowed[1]!.body).toEqual(free[0]!.body)
    expect((await attempt('slowed@tests.example', PASS_PHRASE)).status).toBe(200)
    expect(await world.database.ask('select 1 from throttles where subject like \'account:%\'')).toEqual([])
  })
  it('that does not exist is slowed alike', async () => {
    await clear()
    for (let i = 0; i < 3; i += 1) await attempt('nobody@tests.example')
    expect((await attempt('nobody@tests.example')).ms).toBeGreaterThanOrEqual(SLOW_MS)
  })
})

describe('an address', () => {
  it('is refused with Retry-After once it has tried too often, and let in again when the window has run out', async () => {
    await clear()
    const answers = await Promise.all(Array.from({ length: 20 }, (_, i) => attempt(`somebody-${i}@tests.example`)))
    const refused = answers.filter(one => one.status === 429)
    expect(refused).toHaveLength(5)
    for (const { retryAfter, body } of refused) {
      expect(Number(retryAfter)).toBeGreaterThanOrEqual(1)
      expect(Number(retryAfter)).toBeLessThanOrEqual(4)
      expect([body.code, body.retryAfterSeconds]).toEqual(['too_many', Number(retryAfter)])
    }
    expect((await attempt('right@tests.example', PASS_PHRASE)).status).toBe(429)
    await new Promise(resolve => setTimeout(resolve, 4200))
    expect((await attempt('right@tests.example', PASS_PHRASE)).status).toBe(200)
  })
  it('is counted over several processes and restarts', async () => {
    await clear()
    const other = await startServer(world.database.applicationUrl, LIMITS)
    try {
      const post = (base: string, i: number) => new Visitor(base).post('/api/account/sign-in', { mail: `spread-${i}@tests.example`, passPhrase: 'x' })
      const answers = await Promise.all(Array.from({ length: 18 }, (_, i) => post(i % 2 ? other.base : world.server.base, i)))
      expect(answers.filter(answer => answer.status === 429)).toHaveLength(3)
    } finally {
      await other.stop()
    }
  })
  it('cannot make accounts without end', async () => {
    await clear()
    const answers = await Promise.all(Array.from({ length: 17 }, (_, i) => new Visitor(world.server.base).post('/api/account/register', { mail: `many-${i}@tests.example`, name: 'Many', passPhrase: PASS_PHRASE })))
    expect(answers.filter(answer => answer.status === 429)).toHaveLength(2)
  })
  it('is not believed when it only claims to be forwarded', async () => {
    await clear()
    const answers = await Promise.all(Array.from({ length: 17 }, (_, i) => new Visitor(world.server.base).post('/api/account/sign-in', { mail: `forward-${i}@tests.example`, passPhrase: 'x' }, { 'x-forwarded-for': `10.0.0.${i}` })))
    expect(answers.filter(answer => answer.status === 429)).toHaveLength(2)
  })
})
