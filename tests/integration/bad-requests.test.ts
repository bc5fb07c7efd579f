// What no schema may ever see, and what every refusal looks like.
import { connect } from 'node:net'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import type { Problem } from '../../shared/schemas/problem'
import { makeBench, makeScenario, openWorld, SMALL, type World } from '../support/bench'
import { runBody } from '../support/runs'
import type { Visitor } from '../support/visitor'
import { arrive } from '../support/visitor'

let world: World, person: Visitor, benchId: string, scenarios: string
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  person = await arrive(world.database.db, world.server.base, 'Careless Person')
  benchId = await makeBench(world, person)
  scenarios = `/api/benches/${benchId}/scenarios`
})
afterAll(() => world?.end())

const countRows = async () => (await world.database.ask<{ n: number }>('select (select count(*) from scenarios)::int + (select count(*) from runs)::int as n'))[0]!.n

describe('a body', () => {
  it('of 50 MB is refused before it is read to its end, with or without a stated length', async () => {
    const before = await countRows()
    const large = new Uint8Array(50 * 2 ** 20).fill(0x20)
    const stated = await person.post<Problem>(scenarios, large)
    expect([stated.status, stated.body.code]).toEqual([413, 'too_large'])
    expect(stated.body.detail).toContain('262,144')
    const stream = new ReadableStream({
      start(controller) {
        for (let i = 0; i < 50; i += 1) controller.enqueue(large.subarray(0, 2 ** 20))
        controller.close()
      },
    })
    const answer = await fetch(world.server.base + scenarios, { method: 'POST', body: stream, duplex: 'half', headers: { 'origin': world.server.base, 'content-type': 'application/json', 'cookie': person.cookie } } as RequestInit)
    expect(answer.status).toBe(413)
    expect(await countRows()).toBe(before)
    expect((await person.get('/api/account/me')).status).toBe(200)
  })
  it.each([
    ['malformed JSON', '{"document": {', 400, 'malformed_json'],
    ['bytes that are not UTF-8', new Uint8Array([0x22, 0xFF, 0x22]), 400, 'malformed_json'],
    ['nothing', '', 400, 'malformed_json'],
    ['NaN', '{"document": NaN}', 400, 'malformed_json'],
    ['Infinity written as 1e999', JSON.stringify({ document: SMALL }).replace('"densityPerUm3":800', '"densityPerUm3":1e999'), 422, 'bad_input'],
    ['200,000 opening brackets', '['.repeat(200_000) + ']'.repeat(0), 400, 'malformed_json'],
    ['100,000 levels', '['.repeat(100_000) + ']'.repeat(100_000), 422, 'bad_input'],
    ['a list where an object is wanted', '[]', 422, 'bad_input'],
    ['a NUL character', JSON.stringify({ document: { ...SMALL, notes: 'a\u0000b' } }), 422, 'bad_input'],
    ['half of a surrogate pair', JSON.stringify({ document: { ...SMALL, title: 'a\uD800' } }), 422, 'bad_input'],
    ['a key __proto__', JSON.stringify({ document: SMALL }).replace('{', '{"__proto__":{"admin":true},'), 422, 'bad_input'],
  ])('of %s is refused', async (_, body, status, code) => {
    const answer = await person.post<Problem>(scenarios, body)
    expect([answer.status, answer.body.code]).toEqual([status, code])
    expect(answer.headers.get('content-type')).toBe('application/problem+json')
    expect(JSON.stringify(answer.body)).not.toMatch(/\.mjs|node_modules|at \w+ \(/)
  })
  it('of another content type is refused', async () => {
    for (const type of ['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x'])
      expect((await person.post<Problem>(scenarios, '{}', { 'content-type': type })).status).toBe(415)
    expect((await person.post<Problem>(scenarios, '{}', { 'content-encoding': 'gzip' })).status).toBe(415)
  })
  it('is named field by field, with full paths and each unknown key on its own', async () => {
    const { status, body } = await person.post<Problem>(scenarios, {
      document: { ...SMALL, colour: 'blue', medium: { ...SMALL.medium, spacingNm: 5000, pressure: 1 }, sites: [{ name: 'quick', share: 1, attachProbability: 1.5, speed: 1 }] }, extra: true,
    })
    expect(status).toBe(422)
    expect(body.type).toBe('urn:moorage:problem:bad_input')
    expect(body.errors!.map(one => one.path).sort()).toEqual(['document.colour', 'document.medium.densityPerUm3', 'document.medium.pressure', 'document.medium.spacingNm', 'document.schedule.durationS', 'document.sites.0.attachProbability', 'document.sites.0.speed', 'extra'])
  })
  it.each([
    ['a wrong type', { sites: [{ name: 'q', share: 1, attachProbability: '30' }] }, 'document.sites.0.attachProbability'],
    ['an empty title', { title: '  ' }, 'document.title'],
    ['a title of 10,000 characters', { title: 'x'.repeat(10_000) }, 'document.title'],
    ['an occupancy of 1 or more', { medium: { ...SMALL.medium, densityPerUm3: 9000 } }, 'document.medium.densityPerUm3'],
    ['no diffusion', { medium: { ...SMALL.medium, diffusionUm2PerS: 0 } }, 'document.medium.diffusionUm2PerS'],
    ['a fraction of a row', { ribbon: { ...SMALL.ribbon, rows: 12.5 } }, 'document.ribbon.rows'],
    ['a million samples', { schedule: { ...SMALL.schedule, sampleEveryMs: 0.004 } }, 'document.schedule.sampleEveryMs'],
    ['a fill above 1', { schedule: { ...SMALL.schedule, initialFill: 1.2 } }, 'document.schedule.initialFill'],
  ])('with %s is refused at its path and nothing is stored', async (_, change, path) => {
    const before = await countRows()
    const { status, body } = await person.post<Problem>(scenarios, { document: { ...SMALL, ...change } })
    expect([status, body.errors?.[0]?.path]).toEqual([422, path])
    expect(await countRows()).toBe(before)
  })
  it('with markup or a reversed reading direction in the title is kept as plain text', async () => {
    const { title } = await makeScenario(person, benchId, { title: '\u202Egnp.<script>alert(1)</script>' })
    expect(title).toBe('gnp.<script>alert(1)</script>')
  })
})

describe('a seed', () => {
  it('of 5,000 characters is refused with the limit, one of 200 odd characters is kept exactly', async () => {
    const { scenarioId } = await makeScenario(person, benchId)
    const path = `/api/scenarios/${scenarioId}/runs`
    const run = await runBody(SMALL)
    const long = await person.post<Problem>(path, { ...run, seed: 'x'.repeat(5000) }, { 'idempotency-key': 'long' })
    expect([long.status, long.body.errors]).toEqual([422, [{ path: 'seed', message: 'A seed has at most 200 characters; this has 5000.' }]])
    const seed = ` 9007199254740993 🌊 e\u0301 ${'x'.repeat(150)} `
    const kept = await person.post<{ seed: string }>(path, await runBody(SMALL, { seed }), { 'idempotency-key': 'odd' })
    expect([kept.status, kept.body.seed]).toEqual([201, seed])
  })
})

describe('an address', () => {
  it('takes only its methods and says which', async () => {
    const answer = await person.patch<Problem>('/api/account/me', {})
    expect([answer.status, answer.headers.get('allow')]).toEqual([405, 'HEAD, GET'])
    expect((await person.delete('/api/health')).status).toBe(405)
  })
  it('answers HEAD as GET without the body, and as nobody where nobody may look', async () => {
    const head = async (path: string, cookie: string) => {
      const answer = await fetch(world.server.base + path, { method: 'HEAD', headers: { cookie } })
      return [answer.status, answer.headers.get('content-type'), await answer.text()]
    }
    expect(await head('/api/account/me', person.cookie)).toEqual([200, 'application/json', ''])
    expect(await head('/api/account/me', '')).toEqual([401, 'application/problem+json', ''])
    expect(await head('/api/account/sign-in', person.cookie)).toEqual([405, 'application/problem+json', ''])
    expect((await head('/api/nothing', person.cookie))[0]).toBe(404)
  })
  it('that does not exist answers as problem details', async () => {
    for (const path of ['/api', '/api/', '/api/nothing', '/api/scenarios', '/api/_auth/session']) {
      const { status, headers } = await person.get(path)
      expect([path, status, headers.get('content-type')]).toEqual([path, 404, 'application/problem+json'])
    }
  })
  it.each([
    ['limit=0'], ['limit=101'], ['limit=x'], ['sort=size'], ['unknown=1'], ['cursor=abc'], ['cursor=WyIxIiwiMSJd'], ['search=%00'], ['tag=a&tag=b'], [`search=${'x'.repeat(201)}`],
  ])('with the query %s is refused at that part', async (query) => {
    const { status, body } = await person.get<Problem>(`${scenarios}?${query}`)
    expect([status, body.errors?.[0]?.path]).toEqual([422, query.split('=')[0]])
  })
})

describe('a change', () => {
  const change = (headers: Record<string, string>) => fetch(`${world.server.base}/api/benches`, {
    method: 'POST', body: '{"name":"Forged"}', headers: { 'content-type': 'application/json', 'cookie': person.cookie, ...headers },
  })
  it.each([
    ['no origin', {}, 403], ['a foreign origin', { origin: 'https://evil.example' }, 403], ['the origin null', { origin: 'null' }, 403],
    ['a cross-site fetch', { 'sec-fetch-site': 'cross-site' }, 403], ['a same-site fetch', { 'sec-fetch-site': 'same-site' }, 403], ['a same-origin fetch', { 'sec-fetch-site': 'same-origin' }, 201],
  ])('with %s', async (_, headers, status) => {
    expect((await change(headers as Record<string, string>)).status).toBe(status)
  })
  it('is never taken over the old form of a simple request', async () => {
    expect((await change({ 'origin': world.server.base, 'content-type': 'text/plain' })).status).toBe(415)
  })
})

it('drops a request that never ends, without harm to others', async () => {
  const { hostname, port } = new URL(world.server.base)
  const socket = connect(Number(port), hostname)
  socket.write(`POST ${scenarios} HTTP/1.1\r\nHost: ${hostname}:${port}\r\nOrigin: ${world.server.base}\r\nCookie: ${person.cookie}\r\nContent-Type: application/json\r\nContent-Length: 1000\r\n\r\n{"document":`)
  await new Promise(resolve => setTimeout(resolve, 100))
  socket.destroy()
  expect((await person.get('/api/account/me')).status).toBe(200)
  expect(world.server.log()).not.toContain('[fault]')
})
