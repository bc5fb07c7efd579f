// Accounts: registering, signing in and out, sessions that end at once, and what a browser is given.
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import type { Me, SessionRow } from '../../shared/schemas/api/account'
import { openWorld, type World } from '../support/bench'
import { arrive, PASS_PHRASE, Visitor } from '../support/visitor'

let world: World
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
})
afterAll(() => world?.end())
const stranger = () => new Visitor(world.server.base)

describe('registering', () => {
  it('makes an account, signs in and keeps the mail in lower case with its + part', async () => {
    const person = stranger()
    const made = await person.post<Me>('/api/account/register', { mail: ' Anna.Quay+Lab@Pier.Example ', name: 'Anna Quay', passPhrase: PASS_PHRASE })
    expect(made.status).toBe(201)
    expect(made.body.mail).toBe('anna.quay+lab@pier.example')
    expect((await person.get<Me>('/api/account/me')).body.name).toBe('Anna Quay')
    const again = await stranger().post('/api/account/register', { mail: 'ANNA.quay+lab@pier.example', name: 'Other', passPhrase: PASS_PHRASE })
    expect(again.status).toBe(409)
    expect(again.body.code).toBe('already_there')
  })
  it.each([
    ['a mail without @', { mail: 'nobody', name: 'A', passPhrase: PASS_PHRASE }, 'mail'],
    ['a short pass phrase', { mail: 'a@b.example', name: 'A', passPhrase: 'short' }, 'passPhrase'],
    ['a name of spaces', { mail: 'a@b.example', name: '   ', passPhrase: PASS_PHRASE }, 'name'],
    ['an unknown field', { mail: 'a@b.example', name: 'A', passPhrase: PASS_PHRASE, role: 'lead' }, 'role'],
  ])('refuses %s at its field', async (_, body, path) => {
    const { status, body: problem } = await stranger().post<{ errors: { path: string }[] }>('/api/account/register', body)
    expect(status).toBe(422)
    expect(problem.errors.map(one => one.path)).toEqual([path])
  })
  it('neutralises a name that turns the reading direction or carries markup', async () => {
    const { body } = await stranger().post<Me>('/api/account/register', { mail: 'rtl@pier.example', name: '\u202Eanna <b>x</b>', passPhrase: PASS_PHRASE })
    expect(body.name).toBe('anna <b>x</b>')
  })
})

describe('the session', () => {
  it('is a cookie out of reach of scripts and foreign pages, and holds no account', async () => {
    const person = await arrive(world.database.db, world.server.base, 'Cookie Reader')
    const [row] = await world.database.ask<{ mail: string }>('select mail from users where user_id = $1', [person.userId])
    const answer = await stranger().post('/api/account/sign-in', { mail: row!.mail, passPhrase: PASS_PHRASE })
    const [cookie] = answer.headers.getSetCookie()
    for (const flag of ['HttpOnly', 'Secure', 'SameSite=Lax', 'Path=/']) expect(cookie).toContain(flag)
    const [stored] = await world.database.ask<{ key_hash: string }>('select key_hash from sessions where user_id = $1', [person.userId])
    expect(stored!.key_hash).toMatch(/^[0-9a-f]{64}$/)
    expect(cookie).not.toContain(stored!.key_hash)
  })
  it('gives strangers no cookie', async () => {
    for (const path of ['/api/health', '/api/account/me', '/']) expect((await stranger().get(path)).headers.getSetCookie()).toEqual([])
  })
  it('ends at sign-out, also for a copy of the cookie', async () => {
    const person = await arrive(world.database.db, world.server.base, 'Leaver')
    const { cookie } = person
    expect((await person.post('/api/account/sign-out')).status).toBe(204)
    person.cookie = cookie
    expect((await person.get('/api/account/me')).status).toBe(401)
  })
  it('ends everywhere at the next request of the other browser', async () => {
    const here = await arrive(world.database.db, world.server.base, 'Two Browsers')
    const [row] = await world.database.ask<{ mail: string }>('select mail from users where user_id = $1', [here.userId])
    const there = stranger()
    await there.signIn(row!.mail)
    const listed = (await here.get<SessionRow[]>('/api/account/sessions')).body
    expect(listed.map(one => one.current).sort()).toEqual([false, true])
    expect((await here.delete('/api/account/sessions')).status).toBe(204)
    expect((await there.get('/api/account/me')).status).toBe(401)
  })
  it('tells the owner once how often the pass phrase was wrong', async () => {
    const owner = await arrive(world.database.db, world.server.base, 'Told Owner')
    const [row] = await world.database.ask<{ mail: string }>('select mail from users where user_id = $1', [owner.userId])
    for (let i = 0; i < 3; i += 1) expect((await stranger().signIn(row!.mail, 'not the phrase at all')).status).toBe(401)
    expect((await owner.signIn(row!.mail)).body.failedSignIns?.count).toBe(3)
    expect((await owner.signIn(row!.mail)).body.failedSignIns).toBeUndefined()
  })
  it('refuses a forged cookie', async () => {
    const forger = stranger()
    forger.cookie = 'moorage-session=Fe26.2**00*AA*BB**CC*DD'
    expect((await forger.get('/api/account/me')).status).toBe(401)
  })
})

it('keeps a role change from waiting for the next sign-in', async () => {
  const lead = await arrive(world.database.db, world.server.base, 'Bench Lead')
  const benchId = (await lead.post<{ benchId: string }>('/api/benches', { name: 'Quay' })).body.benchId
  const member = await arrive(world.database.db, world.server.base, 'Bench Member', { benchId, role: 'member' })
  expect((await member.get(`/api/benches/${benchId}`)).status).toBe(200)
  expect((await lead.patch(`/api/benches/${benchId}/members/${member.userId}`, { role: 'guest' })).status).toBe(200)
  expect((await member.get(`/api/benches/${benchId}`)).status).toBe(403)
  expect((await lead.delete(`/api/benches/${benchId}/members/${member.userId}`)).status).toBe(204)
  expect((await member.get(`/api/benches/${benchId}`)).status).toBe(404)
})

it('keeps the last lead, also when two leads step down at once', async () => {
  const first = await arrive(world.database.db, world.server.base, 'First Lead')
  const benchId = (await first.post<{ benchId: string }>('/api/benches', { name: 'Jetty' })).body.benchId
  const path = `/api/benches/${benchId}/members`
  expect((await first.patch(`${path}/${first.userId}`, { role: 'member' })).status).toBe(409)
  expect((await first.delete(`${path}/${first.userId}`)).status).toBe(409)
  const second = await arrive(world.database.db, world.server.base, 'Second Lead', { benchId, role: 'lead' })
  const answers = await Promise.all([first.patch(`${path}/${first.userId}`, { role: 'member' }), second.patch(`${path}/${second.userId}`, { role: 'member' })])
  expect(answers.map(answer => answer.status).sort()).toEqual([200, 409])
})

it('lets demo accounts in only where the server is told so', async () => {
  const demo = await arrive(world.database.db, world.server.base, 'Demo Person')
  await world.database.ask('update users set demo = true where user_id = $1', [demo.userId])
  expect((await demo.get('/api/account/me')).status).toBe(200)
  const { startServer } = await import('../support/server')
  const open = await startServer(world.database.applicationUrl, { NUXT_DEMO_ACCOUNTS: 'false' })
  try {
    const outside = new Visitor(open.base)
    const [row] = await world.database.ask<{ mail: string }>('select mail from users where user_id = $1', [demo.userId])
    expect((await outside.signIn(row!.mail)).status).toBe(401)
    outside.cookie = demo.cookie
    expect((await outside.get('/api/account/me')).status).toBe(401)
  } finally {
    await open.stop()
  }
})
