// Recordings: the file as it came, what the server reads from it, points set aside, fits and weigh-ups that give the same numbers again.
import { createHash } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import type { KeptFit } from '../../shared/fitting/kept-fit'
import type { Page } from '../../shared/schemas/api/bench'
import type { KeptMapping, RecordingDetail, RecordingRow, Upload } from '../../shared/schemas/api/recording'
import type { StaleEdit } from '../../shared/schemas/api/scenario'
import type { WeighUpDetail, WeighUpRow } from '../../shared/schemas/api/weigh-up'
import { RECORDING_LIMITS } from '../../shared/schemas/recording'
import type { Problem } from '../../shared/schemas/problem'
import { weighUp } from '../../shared/fitting/weighing/weigh-up'
import { makeBench, openWorld, type World } from '../support/bench'
import { demoFile, keep, makeRecording, NAMES, TABLE, upload } from '../support/recordings'
import { arrive, type Visitor } from '../support/visitor'

let world: World, lead: Visitor, member: Visitor, benchId: string
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  lead = await arrive(world.database.db, world.server.base, 'Orla')
  benchId = await makeBench(world, lead)
  member = await arrive(world.database.db, world.server.base, 'Tomasz', { benchId, role: 'member' })
})
afterAll(() => world?.end())
const count = async (table: string) => (await world.database.ask<{ n: number }>(`select count(*)::int as n from ${table}`))[0]!.n
const read = async (recordingId: string) => (await lead.get<RecordingDetail>(`/api/recordings/${recordingId}`)).body

describe('a file', () => {
  it('is kept byte for byte, once, and comes back with its hash', async () => {
    const bytes = demoFile('control_messy.csv'), sha256 = createHash('sha256').update(bytes).digest('hex')
    const first = await upload(member, benchId, bytes, 'control_messy.csv'), second = await upload(member, benchId, bytes, 'control_messy.csv')
    expect([first.status, second.status, first.body.sha256, second.body.uploadId]).toEqual([201, 200, sha256, first.body.uploadId])
    const kept = await member.post<RecordingDetail[]>(`/api/benches/${benchId}/recordings`, { uploadId: first.body.uploadId, choices: {}, keep: [{ ...NAMES, from: 'recording' }] })
    expect(kept.status).toBe(201)
    const original = await fetch(`${world.server.base}/api/recordings/${kept.body[0]!.recordingId}/original`, { headers: { cookie: member.cookie } })
    expect(createHash('sha256').update(Buffer.from(await original.arrayBuffer())).digest('hex')).toBe(sha256)
    expect(original.headers.get('content-disposition')).toContain('attachment; filename="control_messy.csv"')
    const again = await upload(member, benchId, bytes, 'control_messy.csv')
    expect(again.body.already).toMatchObject([{ recordingId: kept.body[0]!.recordingId, title: 'Control' }])
  })
  it('reads as USERS 6.3 lists it: eleven means with their SEM', async () => {
    const { body } = await keep(member, benchId, demoFile('control_messy.csv'), { from: 'recording' })
    const { points } = body[0]!.data
    expect(points.map(point => Number(point.ratio.toFixed(3)))).toEqual([0.150, 0.181, 0.243, 0.332, 0.459, 0.594, 0.685, 0.745, 0.799, 0.890, 0.945])
    expect(points.map(point => Number(point.sem!.toFixed(3)))).toEqual([0.008, 0.019, 0.010, 0.015, 0.013, 0.011, 0.012, 0.011, 0.013, 0.012, 0.009])
    expect(body[0]!.reading.setAside).toHaveLength(7)
  })
  it('of 300 MB is refused before it is read, and so is an empty one', async () => {
    const before = await count('uploads')
    const stated = await fetch(`${world.server.base}/api/benches/${benchId}/uploads?name=big.csv`, { method: 'POST', headers: { 'origin': world.server.base, 'cookie': member.cookie, 'content-type': 'application/octet-stream', 'content-length': String(300 * 2 ** 20) }, body: new Uint8Array(1024) } as RequestInit).catch(() => null)
    if (stated) expect(stated.status).toBe(413)
    const large = await upload(member, benchId, new Uint8Array(RECORDING_LIMITS.fileBytes + 1).fill(0x31))
    expect(large.status).toBe(413)
    expect((await upload(member, benchId, new Uint8Array())).status).toBe(422)
    expect(await count('uploads')).toBe(before)
  })
  it.each([
    ['only a header', 'interval_ms,ratio\n', /no rows/],
    ['a spreadsheet archive', Uint8Array.from([0x50, 0x4B, 3, 4, 0, 0, 0, 0]), /CSV/],
    ['text without numbers', 'a,b\nc,d\n', /no rows of numbers|interval/],
    ['an unclosed quote', 'interval_ms,ratio\n"50,0.1\n100,0.2\n', /quote/],
  ])('of %s makes no recording', async (_, bytes, said) => {
    const before = await count('recordings')
    const { status, body } = await keep(member, benchId, bytes, { from: 'recording' })
    expect([status, (body as unknown as Problem).code]).toEqual([422, 'bad_input'])
    expect((body as unknown as Problem).errors!.map(error => error.message).join(' ')).toMatch(said)
    expect(await count('recordings')).toBe(before)
  })
  it('with a number that can be read in two ways is asked about and not settled', async () => {
    const text = 'interval_ms;ratio_mean\n1,234;0,5\n2,345;0,6\n'.replaceAll('0,', '0.')
    const { status, body } = await keep(member, benchId, text, { from: 'recording' })
    expect(status).toBe(422)
    expect((body as unknown as Problem).errors![0]!.path).toMatch(/^choices\./)
  })
  it('of another bench is not to be had', async () => {
    const stranger = await arrive(world.database.db, world.server.base, 'Stranger'), other = await makeBench(world, stranger)
    const { body } = await upload(stranger, other, TABLE)
    const answer = await member.post<Problem>(`/api/benches/${benchId}/recordings`, { uploadId: (body as Upload).uploadId, choices: {}, keep: [{ ...NAMES, from: 'control' }] })
    expect([answer.status, answer.body.errors![0]!.path]).toEqual([422, 'uploadId'])
  })
})

describe('a reading', () => {
  it('is offered for the next file of the same shape', async () => {
    const { body } = await upload(member, benchId, TABLE, 'shape.csv')
    await member.post(`/api/benches/${benchId}/recordings`, { uploadId: body.uploadId, choices: {}, keep: [{ ...NAMES, from: 'control' }], keepMapping: true })
    const [shape] = await world.database.ask<{ shape: string }>('select shape from mappings')
    const found = await lead.get<{ mapping: KeptMapping | null }>(`/api/benches/${benchId}/mappings?shape=${shape!.shape}`)
    expect(found.body.mapping).toMatchObject({ savedBy: expect.stringContaining('Tomasz'), choices: { columns: { 3: 'interval' } } })
    expect((await lead.get<{ mapping: null }>(`/api/benches/${benchId}/mappings?shape=${'0'.repeat(64)}`)).body.mapping).toBeNull()
  })
})

describe('a recording of cells', () => {
  it('has means, SD, SEM and n made here; a lost cell is no zero', async () => {
    const { body } = await keep(member, benchId, demoFile('cells.csv'))
    const { data } = body[0]!
    expect([data.cells.length, data.cells.filter(cell => cell.ratio === null).length, new Set(data.cells.map(cell => cell.cell)).size]).toEqual([99, 3, 9])
    expect(data.points[0]).toMatchObject({ intervalMs: 50, n: 9, ratio: expect.closeTo(0.150, 3), sem: expect.closeTo(0.008, 3) })
  })
})

describe('a recording', () => {
  it('is edited from the revision one has; the second of two is told who and when', async () => {
    const recordingId = await makeRecording(member, benchId), before = await read(recordingId)
    const edit = { title: 'Renamed', condition: 'control', protocol: 'step', manipulation: 'none', details: before.details, notes: 'n', tags: ['new'] }
    const done = await member.put<RecordingDetail>(`/api/recordings/${recordingId}`, edit, { 'if-match': '"1"' })
    expect([done.status, done.body.revision, done.body.title, done.body.tags]).toEqual([200, 2, 'Renamed', ['new']])
    const late = await lead.put<Problem>(`/api/recordings/${recordingId}`, edit, { 'if-match': '"1"' })
    expect([late.status, (late.body.current as StaleEdit).author]).toEqual([412, expect.stringContaining('Tomasz')])
    expect((await lead.put(`/api/recordings/${recordingId}`, edit)).status).toBe(428)
  })
  it('keeps a point that is set aside with its reason, and takes it back', async () => {
    const recordingId = await makeRecording(member, benchId)
    const aside = await member.patch<RecordingDetail>(`/api/recordings/${recordingId}`, { points: [{ position: 0, aside: 'artefact' }] }, { 'if-match': '"1"' })
    expect(aside.status).toBe(200)
    expect([aside.body.data.points[0]!.aside, aside.body.data.points.length, aside.body.aside]).toEqual(['artefact', 11, 1])
    expect((await member.patch<Problem>(`/api/recordings/${recordingId}`, { points: [{ position: 99, aside: 'x' }] }, { 'if-match': '"2"' })).body.errors![0]!.path).toBe('points.0.position')
    const back = await member.patch<RecordingDetail>(`/api/recordings/${recordingId}`, { points: [{ position: 0, aside: null }] }, { 'if-match': '"2"' })
    expect(back.body.data.points[0]!.aside).toBeNull()
  })
  it('is found by its words, goes to the bin and comes back', async () => {
    const { body } = await keep(member, benchId, TABLE, { names: { title: 'Needle' } })
    const list = async (query: string) => (await lead.get<Page<RecordingRow>>(`/api/benches/${benchId}/recordings?${query}`)).body.rows.map(row => row.title)
    expect(await list('search=needle')).toEqual(['Needle'])
    expect((await member.delete(`/api/recordings/${body[0]!.recordingId}`)).status).toBe(204)
    expect([await list('search=needle'), await list('search=needle&bin=1')]).toEqual([[], ['Needle']])
    expect((await member.post(`/api/recordings/${body[0]!.recordingId}/restore`)).status).toBe(200)
    expect(await list('search=needle')).toEqual(['Needle'])
  })
})

describe('a fit', () => {
  it('is made on the server from the recording, and gives the same digest again', async () => {
    const recordingId = await makeRecording(member, benchId)
    const [first, second] = [await member.post<KeptFit>(`/api/recordings/${recordingId}/fits`, {}), await lead.post<KeptFit>(`/api/recordings/${recordingId}/fits`, {})]
    expect([first.status, second.status, second.body.digest]).toEqual([201, 201, first.body.digest])
    const two = first.body.result.fits[1]
    expect(two.parameters.map(one => one.name)).toEqual(['depletion', 'fastShare', 'tauFastS', 'tauSlowS'])
    expect((await lead.get<KeptFit[]>(`/api/recordings/${recordingId}/fits`)).body).toHaveLength(2)
    expect((await member.post<Problem>(`/api/recordings/${recordingId}/fits`, { weights: 'gold' })).status).toBe(422)
  })
  it('of a flat curve is refused with the reason', async () => {
    const flat = TABLE.replace(/,0\.\d+,0\.033/g, ',0.5,0.033')
    const { body } = await keep(member, benchId, flat)
    const { status, body: said } = await member.post<Problem>(`/api/recordings/${body[0]!.recordingId}/fits`, {})
    expect([status, said.errors![0]!.message]).toEqual([422, expect.stringContaining('flat')])
  })
})

describe('a weigh-up', () => {
  it('is weighed on the server, versioned, and gives the same digest here from its kept data', async () => {
    const ids: string[] = []
    for (const [from, protocol, manipulation] of [['control', '200 ms step', 'none'], ['short', '25 ms step', 'none'], ['AK-7', '200 ms step', 'AK-7'], ['TP-4 peptide', '200 ms step', 'TP-4 peptide']] as const)
      ids.push((await keep(member, benchId, demoFile('cells.csv'), { from, names: { title: from, condition: from, protocol, manipulation } })).body[0]!.recordingId)
    const made = await member.post<WeighUpDetail>(`/api/benches/${benchId}/weigh-ups`, { title: 'All four', recordings: ids })
    expect(made.status).toBe(201)
    expect(made.body.result.verdict).toMatchObject({ kind: 'prefers', explanation: 'site-kinds' })
    const here = weighUp({ conditions: made.body.data, settings: made.body.settings })
    expect(here && 'digest' in here && here.digest).toBe(made.body.digest)
    const again = await lead.post<WeighUpDetail>(`/api/weigh-ups/${made.body.weighUpId}/versions`, {})
    expect([again.status, again.body.version, again.body.digest]).toEqual([201, 2, made.body.digest])
    expect((await lead.get<WeighUpDetail>(`/api/weigh-ups/${made.body.weighUpId}/versions/1`)).body).toMatchObject({ shown: 1, version: 2, digest: made.body.digest })
    expect((await lead.get(`/api/weigh-ups/${made.body.weighUpId}/versions/9`)).status).toBe(404)
    const rows = (await lead.get<Page<WeighUpRow>>(`/api/benches/${benchId}/weigh-ups`)).body.rows
    expect(rows[0]).toMatchObject({ title: 'All four', conditions: ['control', 'short', 'AK-7', 'TP-4 peptide'], verdict: { kind: 'prefers' } })
  })
  it('of one condition named twice, or of a recording that is not here, is refused and nothing is kept', async () => {
    const before = await count('weigh_ups'), recordingId = await makeRecording(member, benchId), twin = await makeRecording(member, benchId)
    for (const recordings of [[recordingId, twin], [recordingId, '01890000-0000-7000-8000-000000000009'], [recordingId, recordingId], []])
      expect((await member.post<Problem>(`/api/benches/${benchId}/weigh-ups`, { title: 'No', recordings })).status).toBe(422)
    expect(await count('weigh_ups')).toBe(before)
  })
})
