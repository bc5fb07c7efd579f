// Every route of the API × role × own and other bench. A route file without a row, or a row without a case, fails.
import { readdirSync, readFileSync } from 'node:fs'
import { join, relative } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { methodsOf, ROUTES, type RouteRow } from '../../server/utils/routes'
import { reachOf, type Action, type Role } from '../../shared/permissions'
import { everyone, makeScenario, openWorld, SMALL, type Everyone, type World } from '../support/bench'
import { makeRecording, makeWeighUp } from '../support/recordings'
import { runBody } from '../support/runs'
import type { Visitor } from '../support/visitor'

const API = fileURLToPath(new URL('../../server/api', import.meta.url))
const files = (readdirSync(API, { recursive: true }) as string[]).filter(file => file.endsWith('.ts') && !file.includes('[...]'))

/** `benches/[benchId]/index.get.ts` is GET /api/benches/:benchId. */
function routeOfFile(file: string): string {
  const [, name, method] = /^(.*)\.(get|post|put|patch|delete)\.ts$/.exec(file)!
  return `${method!.toUpperCase()} /api/${name!.replace(/(^|\/)index$/, '').replace(/\[(\w+)\]/g, ':$1')}`.replace(/\/$/, '')
}
const nameOf = (row: RouteRow) => `${row.method} ${row.path}`

describe('the table of routes', () => {
  it('has a row for every file and a file for every row', () => {
    expect(files.map(routeOfFile).sort()).toEqual(ROUTES.map(nameOf).sort())
  })
  it.each(files)('%s lets in whom its row says', (file) => {
    const { access } = ROUTES.find(row => nameOf(row) === routeOfFile(file))!
    const source = readFileSync(join(API, file), 'utf8')
    const calls = [...source.matchAll(/(publicRoute|signedIn|requireMember)\(event(?:, '([\w.-]+)')?/g)].map(([, call, action]) => action ?? call)
    expect(calls, relative(API, file)).toEqual([access === 'public' ? 'publicRoute' : access === 'signed-in' ? 'signedIn' : access])
  })
  it('knows the methods of an address', () => {
    expect(methodsOf('/api/scenarios/x')).toEqual(['GET', 'PUT', 'PATCH', 'DELETE'])
    expect(methodsOf('/api/openapiXjson')).toEqual([])
  })
})

interface Bench { benchId: string, scenarioId: string, runId: string, recordingId: string, weighUpId: string, memberId: string }
let world: World, people: Everyone, own: Bench, other: Bench

async function fill(lead: Visitor, owner: Visitor, benchId: string, memberId: string): Promise<Bench> {
  const { scenarioId } = await makeScenario(owner, benchId)
  const { body, status } = await lead.post<{ runId: string }>(`/api/scenarios/${scenarioId}/runs`, await runBody(SMALL, { seed: 'matrix' }), { 'idempotency-key': 'matrix' })
  if (status !== 201) throw new Error(`matrix: the run was not saved: ${JSON.stringify(body)}`)
  const recordingId = await makeRecording(lead, benchId)
  return { benchId, scenarioId, runId: body.runId, recordingId, weighUpId: await makeWeighUp(lead, benchId, [recordingId]), memberId }
}
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  const made = await everyone(world)
  people = made.people
  own = await fill(people.lead, people.lead, made.benchId, people.guest.userId)
  other = await fill(people.stranger, people.stranger, made.otherBenchId, people.stranger.userId)
})
afterAll(() => world?.end())

const fillIn = (path: string, bench: Bench) => path.replace(':benchId', bench.benchId).replace(':scenarioId', bench.scenarioId).replace(':runId', bench.runId)
  .replace(':recordingId', bench.recordingId).replace(':weighUpId', bench.weighUpId)
  .replace(':userId', bench.memberId).replace(':revision', '1').replace(':name', 'scenario')

const ITEMS: [string, Action][] = [[':runId', 'run.read'], [':scenarioId', 'scenario.read'], [':recordingId', 'recording.read'], [':weighUpId', 'weigh-up.read']]
/** What someone in a role must be answered on a thing that the lead made: the table, 404 for what they may not know of, 403 for the rest. */
function expected(row: RouteRow, role: Role): 'in' | 403 | 404 {
  const action = row.access as Action
  const item = ITEMS.find(([parameter]) => row.path.includes(parameter))?.[1] ?? null
  if (item && reachOf(role, item) !== 'all') return 404
  const reach = reachOf(role, action)
  const makesNew = ['scenario.create', 'run.save', 'recording.create', 'weigh-up.create'].includes(action)
  return reach === 'all' || (reach !== 'none' && (!item || makesNew)) ? 'in' : 403
}
/** A refusal of another kind (missing body, stale revision, rule) shows that the door was passed; nothing is changed by the walk. */
const passed = (status: number) => ![401, 403, 404].includes(status)
const rows = ROUTES.filter(row => row.access !== 'public' && row.access !== 'signed-in')
const ROLES_WALKED: Role[] = ['guest', 'trainee', 'member', 'lead']
/** Deletions take the body's place last, so that what they remove was walked by everyone before. */
const walk = (row: RouteRow) => row.method === 'DELETE' || /\/(restore|duplicate)$/.test(row.path)

describe.each(rows.map(row => [nameOf(row), row] as const))('%s', (_, row) => {
  it.each(ROLES_WALKED)('answers a %s by the table, on a thing of the lead', async (role) => {
    if (walk(row) && expected(row, role) === 'in') return expect(await passedOnCopy(row, role)).toBe(true)
    const { status } = await people[role].send(row.method, fillIn(row.path, own), row.body ? {} : undefined)
    const wanted = expected(row, role)
    if (wanted === 'in') expect(passed(status), String(status)).toBe(true)
    else expect(status).toBe(wanted)
  })
  it('answers a stranger, and everyone on another bench, exactly as an id that never existed', async () => {
    const nowhere = { benchId: '01890000-0000-7000-8000-000000000000', scenarioId: '01890000-0000-7000-8000-000000000001', runId: '01890000-0000-7000-8000-000000000002', recordingId: '01890000-0000-7000-8000-000000000004', weighUpId: '01890000-0000-7000-8000-000000000005', memberId: own.memberId }
    const never = await people.lead.send(row.method, fillIn(row.path, nowhere), row.body ? {} : undefined)
    expect(never.status).toBe(404)
    const asked: [Visitor, Bench][] = [[people.stranger, own], ...ROLES_WALKED.map((role): [Visitor, Bench] => [people[role], other])]
    for (const [who, where] of asked) {
      const { status, body } = await who.send(row.method, fillIn(row.path, where), row.body ? {} : undefined)
      expect([status, body]).toEqual([404, never.body])
    }
    for (const malformed of ['x', '..%2fx', '00000000-0000-0000-0000-00000000000', '%00']) {
      const { status, body } = await people.lead.send(row.method, fillIn(row.path, { ...nowhere, benchId: malformed, scenarioId: malformed, runId: malformed, recordingId: malformed, weighUpId: malformed }), row.body ? {} : undefined)
      expect([status, body]).toEqual([404, never.body])
    }
  })
  it('answers someone signed out with 401', async () => {
    expect((await people.signedOut.send(row.method, fillIn(row.path, own), row.body ? {} : undefined)).status).toBe(401)
  })
})

/** Walks a changing route on something made for this purpose by the lead. */
async function passedOnCopy(row: RouteRow, role: Role): Promise<boolean> {
  const leaver = { ...own }
  if (row.path.includes(':scenarioId')) leaver.scenarioId = (await makeScenario(people.lead, own.benchId)).scenarioId
  if (row.path.includes(':userId')) leaver.memberId = '01890000-0000-7000-8000-000000000003'
  if (row.path.includes(':runId')) {
    const { body } = await people.lead.post<{ runId: string }>(`/api/scenarios/${own.scenarioId}/runs`, await runBody(SMALL, { seed: `copy ${role}` }), { 'idempotency-key': `copy-${row.method}-${role}` })
    leaver.runId = body.runId
  }
  if (row.path.includes(':recordingId')) leaver.recordingId = await makeRecording(people.lead, own.benchId)
  if (row.path.includes(':weighUpId')) leaver.weighUpId = await makeWeighUp(people.lead, own.benchId, [own.recordingId])
  const { status } = await people[role].send(row.method, fillIn(row.path, leaver), row.body ? {} : undefined, row.ifMatch && { 'if-match': '"1"' })
  // A member that is not there is the one 404 that tells of a passed door.
  return row.path.includes(':userId') ? status === 404 : passed(status)
}

describe('routes without a bench', () => {
  it.each(ROUTES.filter(row => row.access === 'signed-in').map(row => [nameOf(row), row] as const))('%s wants an account', async (_, row) => {
    expect((await people.signedOut.send(row.method, row.path, row.body ? {} : undefined)).status).toBe(401)
  })
  it.each(ROUTES.filter(row => row.access === 'public' && row.method === 'GET').map(row => [nameOf(row), row] as const))('%s is open', async (_, row) => {
    expect((await people.signedOut.get(fillIn(row.path, own))).status).toBe(200)
  })
})

describe('what a member and a trainee own', () => {
  it('lets a member delete their own scenario and not another\'s', async () => {
    const mine = await makeScenario(people.member, own.benchId)
    expect(mine.mayDelete).toBe(true)
    expect((await people.member.delete(`/api/scenarios/${mine.scenarioId}`)).status).toBe(204)
    expect((await people.member.delete(`/api/scenarios/${own.scenarioId}`)).status).toBe(403)
  })
  it('lets a trainee edit their own scenario, and answers the saving of a run with the rule', async () => {
    const mine = await makeScenario(people.trainee, own.benchId)
    const edit = { document: { ...mine.document, title: 'Renamed' } }
    expect((await people.trainee.put(`/api/scenarios/${mine.scenarioId}`, edit, { 'if-match': '"1"' })).status).toBe(200)
    expect((await people.trainee.put(`/api/scenarios/${own.scenarioId}`, edit, { 'if-match': '"1"' })).status).toBe(403)
    for (const scenarioId of [mine.scenarioId, own.scenarioId]) {
      const { status, body } = await people.trainee.post(`/api/scenarios/${scenarioId}/runs`, {})
      expect([status, body.code]).toEqual([409, 'rule_of_the_bench'])
      expect(body.detail).toContain('Trainees write down what they expect first')
    }
  })
  it('lists nothing for a guest, as nothing is shared yet', async () => {
    expect((await people.guest.get(`/api/benches/${own.benchId}/scenarios`)).body).toEqual({ rows: [], nextCursor: null })
    expect((await people.guest.get(`/api/benches/${own.benchId}/runs`)).body).toEqual({ rows: [], nextCursor: null })
  })
})
