// Scenarios: immutable revisions, edits that meet, lists that page, the bin, tags, copies.
import { BIN_DAYS } from '../../shared/bin'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import type { BenchHome, Page } from '../../shared/schemas/api/bench'
import type { RevisionDetail, RevisionRow, ScenarioDetail, ScenarioRow, StaleEdit } from '../../shared/schemas/api/scenario'
import type { Problem } from '../../shared/schemas/problem'
import { ScenarioSchema } from '../../shared/schemas/scenario'
import { scenarioDigest } from '../../shared/walk/digest'
import { makeBench, makeScenario, openWorld, SMALL, type World } from '../support/bench'
import { arrive, type Visitor } from '../support/visitor'

let world: World, lead: Visitor, member: Visitor, benchId: string
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  lead = await arrive(world.database.db, world.server.base, 'Orla')
  benchId = await makeBench(world, lead)
  member = await arrive(world.database.db, world.server.base, 'Tomasz', { benchId, role: 'member' })
})
afterAll(() => world?.end())

const pathOf = (scenario: { scenarioId: string }) => `/api/scenarios/${scenario.scenarioId}`
const edited = (scenario: ScenarioDetail, title: string) => ({ document: { ...scenario.document, title }, message: `Named ${title}` })

describe('a scenario', () => {
  it('is kept with defaults filled in, its digest and an ETag', async () => {
    const answer = await lead.post<ScenarioDetail>(`/api/benches/${benchId}/scenarios`, { document: SMALL, message: 'First', tags: ['b', 'a', 'b'] })
    expect([answer.status, answer.headers.get('etag')]).toEqual([201, '"1"'])
    const wanted = ScenarioSchema.parse(SMALL)
    expect(answer.body.document).toEqual(wanted)
    expect(answer.body.digest).toBe(scenarioDigest(wanted))
    expect(answer.body.tags).toEqual(['a', 'b'])
    expect((await lead.get<ScenarioDetail>(pathOf(answer.body))).body).toEqual(answer.body)
  })
  it('may have the name of another', async () => {
    const [one, other] = [await makeScenario(lead, benchId), await makeScenario(lead, benchId)]
    expect(one.title).toBe(other.title)
    expect(one.scenarioId).not.toBe(other.scenarioId)
  })
  it('makes a revision of each change and none of an unchanged document', async () => {
    const scenario = await makeScenario(lead, benchId)
    const same = await lead.put<ScenarioDetail>(pathOf(scenario), { document: scenario.document, tags: ['kept'] }, { 'if-match': '"1"' })
    expect([same.status, same.body.revision, same.body.tags, same.body.updatedAt]).toEqual([200, 1, ['kept'], scenario.updatedAt])
    const changed = await member.put<ScenarioDetail>(pathOf(scenario), edited(scenario, 'Renamed'), { 'if-match': '"1"' })
    expect([changed.body.revision, changed.body.updatedBy, changed.headers.get('etag')]).toEqual([2, 'Tomasz', '"2"'])
    const { body: history } = await lead.get<RevisionRow[]>(`${pathOf(scenario)}/revisions`)
    expect(history.map(row => [row.revision, row.author, row.message])).toEqual([[2, 'Tomasz', 'Named Renamed'], [1, 'Orla', '']])
  })
  it('takes tags without a revision', async () => {
    const scenario = await makeScenario(lead, benchId)
    const { body } = await lead.patch<ScenarioDetail>(pathOf(scenario), { tags: ['drug', 'control'] })
    expect([body.revision, body.tags]).toEqual([1, ['control', 'drug']])
  })
  it('can be copied, with a history of its own', async () => {
    const scenario = await makeScenario(lead, benchId)
    const { status, body } = await member.post<ScenarioDetail>(`${pathOf(scenario)}/duplicate`, {})
    expect([status, body.title, body.revision, body.createdBy]).toEqual([201, 'Small and stirred (copy)', 1, 'Tomasz'])
    expect((await member.post<ScenarioDetail>(`${pathOf(scenario)}/duplicate`, { title: 'Mine' })).body.title).toBe('Mine')
    expect((await member.post<Problem>(`${pathOf(scenario)}/duplicate`, { title: ' ' })).body.errors?.[0]?.path).toBe('title')
  })
  it('has an old revision made the newest again, in between nothing is lost', async () => {
    const scenario = await makeScenario(lead, benchId)
    await lead.put(pathOf(scenario), edited(scenario, 'Second'), { 'if-match': '"1"' })
    const { status, body } = await lead.post<ScenarioDetail>(`${pathOf(scenario)}/revisions/1/restore`, undefined, { 'if-match': '"2"' })
    expect([status, body.revision, body.title]).toEqual([200, 3, SMALL.title])
    const { body: between } = await lead.get<RevisionDetail>(`${pathOf(scenario)}/revisions/2`)
    expect(between.document.title).toBe('Second')
    for (const revision of ['4', '0', '1x', '99999999999']) expect((await lead.get(`${pathOf(scenario)}/revisions/${revision}`)).status).toBe(404)
  })
})

describe('two people editing', () => {
  it('tells the second who saved and when, and keeps the first', async () => {
    const scenario = await makeScenario(lead, benchId)
    const first = await member.put<ScenarioDetail>(pathOf(scenario), edited(scenario, 'Of Tomasz'), { 'if-match': '"1"' })
    const second = await lead.put<Problem>(pathOf(scenario), edited(scenario, 'Of Orla'), { 'if-match': '"1"' })
    expect([second.status, second.body.code]).toEqual([412, 'moved_on'])
    const current = second.body.current as StaleEdit
    expect([current.revision, current.author, current.savedAt]).toEqual([2, 'Tomasz', first.body.updatedAt])
    expect((await lead.get<ScenarioDetail>(pathOf(scenario))).body.title).toBe('Of Tomasz')
  })
  it('lets one of twenty edits sent at once win', async () => {
    const scenario = await makeScenario(lead, benchId)
    const answers = await Promise.all(Array.from({ length: 20 }, (_, i) => (i % 2 ? lead : member).put(pathOf(scenario), edited(scenario, `Version ${i}`), { 'if-match': '"1"' })))
    expect(answers.map(answer => answer.status).sort()).toEqual([200, ...Array.from({ length: 19 }, () => 412)])
    expect((await lead.get<RevisionRow[]>(`${pathOf(scenario)}/revisions`)).body).toHaveLength(2)
  })
  it('wants If-Match, in its own form', async () => {
    const scenario = await makeScenario(lead, benchId)
    expect((await lead.put<Problem>(pathOf(scenario), edited(scenario, 'x'))).status).toBe(428)
    for (const given of ['1', '*', '"x"', '"1", "2"']) expect((await lead.put<Problem>(pathOf(scenario), edited(scenario, 'x'), { 'if-match': given })).status).toBe(422)
    expect((await lead.put<Problem>(pathOf(scenario), edited(scenario, 'x'), { 'if-match': '"7"' })).status).toBe(412)
  })
})

describe('the bin', () => {
  it('takes a scenario out of lists and back, with its history', async () => {
    const scenario = await makeScenario(member, benchId, { title: 'To the bin' })
    expect((await member.delete(pathOf(scenario))).status).toBe(204)
    const gone = await member.get(pathOf(scenario))
    const never = await member.get('/api/scenarios/01890000-0000-7000-8000-000000000009')
    expect([gone.status, gone.body]).toEqual([404, never.body])
    expect((await member.delete(pathOf(scenario))).status).toBe(404)
    const titles = async (bin: string) => (await lead.get<Page<ScenarioRow>>(`/api/benches/${benchId}/scenarios?bin=${bin}&search=to the bin`)).body.rows.map(row => row.title)
    expect([await titles('0'), await titles('1')]).toEqual([[], ['To the bin']])
    expect((await lead.post<ScenarioDetail>(`${pathOf(scenario)}/restore`)).status).toBe(200)
    expect(await titles('0')).toEqual(['To the bin'])
  })

  it('keeps for thirty days; after them nothing of it is found or taken out', async () => {
    const scenario = await makeScenario(member, benchId, { title: 'Long in the bin' })
    await member.delete(pathOf(scenario))
    const lay = (days: number) => world.database.ask(`update scenarios set deleted_at = now() - interval '${days} days' where scenario_id = '${scenario.scenarioId}'`)
    const listed = async () => (await lead.get<Page<ScenarioRow>>(`/api/benches/${benchId}/scenarios?bin=1&search=long in the bin`)).body.rows.length
    await lay(BIN_DAYS + 1)
    expect(await listed()).toBe(0)
    const never = await member.get('/api/scenarios/01890000-0000-7000-8000-000000000009')
    const late = await member.post(`${pathOf(scenario)}/restore`)
    expect([late.status, late.body]).toEqual([404, never.body])
    await lay(BIN_DAYS - 1)
    expect(await listed()).toBe(1)
    expect((await member.post(`${pathOf(scenario)}/restore`)).status).toBe(200)
  })
})

describe('the list', () => {
  it('pages without loss or repetition in every order, while rows are added', async () => {
    const person = await arrive(world.database.db, world.server.base, 'Lister')
    const bench = await makeBench(world, person, 'Long pier')
    const titles = Array.from({ length: 23 }, (_, i) => `${'cba'[i % 3]} ${i % 5}`)
    for (const title of titles) await makeScenario(person, bench, { title })
    for (const [sort, order] of [['updated', 'desc'], ['updated', 'asc'], ['title', 'asc'], ['title', 'desc'], ['created', 'desc']]) {
      const seen: ScenarioRow[] = []
      let cursor = ''
      for (let page = 0; page < 20; page += 1) {
        const { body } = await person.get<Page<ScenarioRow>>(`/api/benches/${bench}/scenarios?sort=${sort}&order=${order}&limit=5&cursor=${cursor}`)
        seen.push(...body.rows)
        if (!body.nextCursor) break
        cursor = body.nextCursor
      }
      expect(seen).toHaveLength(23)
      expect(new Set(seen.map(row => row.scenarioId)).size).toBe(23)
      const keys = seen.map(row => sort === 'title' ? row.title : sort === 'created' ? row.createdAt : row.updatedAt)
      expect(keys).toEqual(order === 'asc' ? [...keys].sort() : [...keys].sort().reverse())
    }
  })
  it('finds by part of a title or tag, whatever its case, taking signs as they are', async () => {
    await makeScenario(lead, benchId, { title: 'AK-7, 20 µM 100%' })
    const tagged = await makeScenario(lead, benchId, { title: 'Otherwise named' })
    await lead.patch(pathOf(tagged), { tags: ['Peptide'] })
    const find = async (query: string) => (await lead.get<Page<ScenarioRow>>(`/api/benches/${benchId}/scenarios?${query}`)).body.rows.map(row => row.title)
    expect(await find('search=ak-7')).toEqual(['AK-7, 20 µM 100%'])
    expect(await find(`search=${encodeURIComponent('%')}`)).toEqual(['AK-7, 20 µM 100%'])
    expect(await find('search=pept')).toEqual(['Otherwise named'])
    expect(await find('tag=Peptide')).toEqual(['Otherwise named'])
    expect(await find('tag=peptide')).toEqual([])
    expect(await find(`search=${encodeURIComponent('\' or 1=1 --')}`)).toEqual([])
  })
})

it('shows on the bench\'s home what changed, by whom', async () => {
  const bench = await makeBench(world, lead, 'Home pier')
  const scenario = await makeScenario(lead, bench, { title: 'Seen at home' })
  await lead.put(pathOf(scenario), edited(scenario, 'Seen again'), { 'if-match': '"1"' })
  await lead.delete(pathOf(scenario))
  await lead.post(`${pathOf(scenario)}/restore`)
  const { body } = await lead.get<BenchHome>(`/api/benches/${bench}/home`)
  expect(body.changes.map(change => [change.kind, change.who, change.title])).toEqual([
    ['scenario-restored', 'Orla', 'Seen again'], ['scenario-binned', 'Orla', 'Seen again'], ['revision-saved', 'Orla', 'Seen again'], ['scenario-created', 'Orla', 'Seen again'],
  ])
  expect([body.scenarioCount, body.scenarios[0]?.title, body.scenarios[0]?.lastRun, body.members]).toEqual([1, 'Seen again', null, [{ name: 'Orla', role: 'lead' }]])
})
