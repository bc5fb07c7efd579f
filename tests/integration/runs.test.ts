// Saving runs: every figure is made again, retries make one run, forged blocks are found.
import { setTimeout as pause } from 'node:timers/promises'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import type { BenchHome, Page } from '../../shared/schemas/api/bench'
import type { RunDetail, RunRow, RunSave } from '../../shared/schemas/api/run'
import type { ScenarioDetail } from '../../shared/schemas/api/scenario'
import { OutcomeSchema } from '../../shared/schemas/outcome'
import type { Problem } from '../../shared/schemas/problem'
import { ScenarioSchema, type ScenarioInput } from '../../shared/schemas/scenario'
import { buildOutcome } from '../../shared/walk/outcome'
import type { ReplicateBlock } from '../../shared/walk/types'
import { makeBench, makeScenario, openWorld, SMALL, type World } from '../support/bench'
import { digestOfRun, runBody } from '../support/runs'
import { arrive, type Visitor } from '../support/visitor'

const WALKED: ScenarioInput = { ...SMALL, title: 'Small and held', reservoir: { supply: 'held', marginSites: 4 } }
const TWO_STEP: ScenarioInput = {
  ...SMALL, title: 'Everything at once',
  sites: [{ name: 'quick', share: 0.5, attachProbability: 0.3, readyPerS: 5, detachPerS: 0.2 }, { name: 'reluctant', share: 0.5, attachProbability: 0.05 }],
  schedule: { ...SMALL.schedule, releases: [{ atMs: 2000, fraction: 0.5 }], decline: { restFactor: 0.2, timeConstantS: 1 } },
}
let world: World, lead: Visitor, benchId: string, stirred: ScenarioDetail, walked: ScenarioDetail
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  lead = await arrive(world.database.db, world.server.base, 'Ngozi')
  benchId = await makeBench(world, lead)
  stirred = await makeScenario(lead, benchId)
  walked = await makeScenario(lead, benchId, WALKED)
})
afterAll(() => world?.end())

let keys = 0
const save = <Body = RunDetail>(scenario: ScenarioDetail, run: unknown, key = `key-${keys += 1}`) => lead.post<Body>(`/api/scenarios/${scenario.scenarioId}/runs`, run, { 'idempotency-key': key })
const runCount = async () => (await world.database.ask<{ n: number }>('select count(*)::int as n from runs'))[0]!.n
/** Waits for the audit of a saved run, at most half a minute. */
async function audited(run: RunDetail): Promise<RunRow['audit']> {
  for (let i = 0; i < 150; i += 1) {
    const { body } = await lead.get<RunDetail>(`/api/runs/${run.runId}`)
    if (body.audit.state !== 'waiting') return body.audit
    await pause(200)
  }
  throw new Error(`The audit did not come. ${world.server.log()}`)
}

describe('a run', () => {
  it('is stored with the outcome that the server makes from its blocks, and is audited whole', async () => {
    const body = await runBody(WALKED, { replicates: 120, seed: 'kp 🌊' })
    const { status, body: saved } = await save(walked, body)
    expect(status).toBe(201)
    const scenario = ScenarioSchema.parse(WALKED)
    expect(OutcomeSchema.parse(saved.outcome)).toEqual(JSON.parse(JSON.stringify(buildOutcome({ scenario, seed: body.seed, engine: body.engine, blocks: body.blocks, partial: false, landingError: saved.outcome.landingErrorPerJump }))))
    expect([saved.number, saved.replicates, saved.seed, saved.savedBy, saved.audit.state, saved.audit.blocks]).toEqual([1, 120, 'kp 🌊', 'Ngozi', 'waiting', 3])
    expect(await audited(saved)).toMatchObject({ state: 'audited', blocksRedrawn: 3, blocks: 3, detection: 1 })
    expect((await lead.get<ReplicateBlock[]>(`/api/runs/${saved.runId}/blocks`)).body).toEqual(JSON.parse(JSON.stringify(body.blocks)))
  })
  it.each([['with everything that a schedule may hold', TWO_STEP], ['of a walk step by step', { ...WALKED, medium: { ...WALKED.medium, crowding: 'exclusive' as const } }]])('%s passes its checks', async (_, input) => {
    const scenario = await makeScenario(lead, benchId, input)
    const { status, body } = await save(scenario, await runBody(input))
    expect(status, JSON.stringify(body).slice(0, 500)).toBe(201)
    expect((await audited(body)).state).toBe('audited')
  })
  it('that was stopped keeps its contiguous replicates and says partial', async () => {
    const run = await runBody(SMALL, { replicates: 200, seed: 'stopped', forge: (one) => {
      one.blocks = one.blocks.slice(0, 2)
      one.partial = true
    } })
    const { status, body } = await save(stirred, run)
    expect([status, body.partial, body.replicates, body.replicatesAsked, body.outcome.partial]).toEqual([201, true, 100, 200, true])
  })
  it('of one replicate has no interval', async () => {
    const { status, body } = await save(stirred, await runBody(SMALL, { replicates: 1, seed: 'one' }))
    expect([status, body.outcome.ratio.low]).toEqual([201, null])
  })
  it('stands in lists, on the bench\'s home and in the history, and goes to the bin and back', async () => {
    const { body: saved } = await save(stirred, await runBody(SMALL, { seed: 'listed' }))
    const list = async (bin = 0) => (await lead.get<Page<RunRow>>(`/api/scenarios/${stirred.scenarioId}/runs?bin=${bin}`)).body.rows.map(row => row.runId)
    expect((await lead.get<BenchHome>(`/api/benches/${benchId}/home`)).body.scenarios.find(one => one.scenarioId === stirred.scenarioId)?.lastRun).toMatchObject({ runId: saved.runId, number: saved.number, verdict: saved.verdict })
    expect(await list()).toContain(saved.runId)
    expect((await lead.delete(`/api/runs/${saved.runId}`)).status).toBe(204)
    expect([(await list()).includes(saved.runId), (await list(1)).includes(saved.runId), (await lead.get(`/api/runs/${saved.runId}`)).status]).toEqual([false, true, 404])
    expect((await lead.post(`/api/runs/${saved.runId}/restore`)).status).toBe(200)
    expect((await lead.get<RunDetail>(`/api/runs/${saved.runId}`)).body).toMatchObject({ document: { title: SMALL.title }, scenarioBinned: false })
    const first = (await lead.get<Page<RunRow>>(`/api/benches/${benchId}/runs?limit=1`)).body
    const second = (await lead.get<Page<RunRow>>(`/api/benches/${benchId}/runs?limit=1&cursor=${first.nextCursor}`)).body
    expect(first.rows[0]!.number - second.rows[0]!.number).toBe(1)
  })
})

describe('a run whose scenario went to the bin', () => {
  it('stays readable with what was walked, and says so', async () => {
    const scenario = await makeScenario(lead, benchId, { title: 'Binned later' })
    const { body: saved } = await save(scenario, await runBody(SMALL, { seed: 'stays' }))
    await lead.delete(`/api/scenarios/${scenario.scenarioId}`)
    const { status, body } = await lead.get<RunDetail>(`/api/runs/${saved.runId}`)
    expect([status, body.scenarioBinned, body.document.title, body.outcome.digest]).toEqual([200, true, 'Binned later', saved.outcome.digest])
  })
})

describe('a page of another account', () => {
  it('saves nothing in the name of whoever is signed in now', async () => {
    const before = await runCount(), other = await arrive(world.database.db, world.server.base, 'Someone Else')
    const body = await runBody(SMALL, { seed: 'whose' })
    const answer = await lead.post<Problem>(`/api/scenarios/${stirred.scenarioId}/runs`, body, { 'idempotency-key': 'whose', 'x-moorage-person': other.userId })
    expect([answer.status, answer.body.code]).toEqual([401, 'sign_in_first'])
    expect(answer.body.detail).toContain('Another account is signed in here now')
    expect(await runCount()).toBe(before)
    expect((await lead.post(`/api/scenarios/${stirred.scenarioId}/runs`, body, { 'idempotency-key': 'whose', 'x-moorage-person': lead.userId })).status).toBe(201)
  })
})

describe('one idempotency key', () => {
  it('makes one run of twenty requests at once, and the same answer later', async () => {
    const before = await runCount()
    const body = await runBody(SMALL, { seed: 'twenty' })
    const answers = await Promise.all(Array.from({ length: 20 }, () => save(stirred, body, 'one-key')))
    expect(new Set(answers.map(answer => answer.body.runId)).size).toBe(1)
    expect(answers.map(answer => answer.status).sort()).toEqual([...Array.from({ length: 19 }, () => 200), 201])
    expect(await runCount()).toBe(before + 1)
    expect((await save(stirred, body, 'one-key')).status).toBe(200)
  })
  it('is refused for another run, when missing and when malformed', async () => {
    await save(stirred, await runBody(SMALL, { seed: 'a' }), 'reused')
    const other = await save<Problem>(stirred, await runBody(SMALL, { seed: 'b' }), 'reused')
    expect([other.status, other.body.errors?.[0]?.path]).toEqual([422, 'Idempotency-Key'])
    for (const headers of [{}, { 'idempotency-key': 'x'.repeat(201) }, { 'idempotency-key': 'two words' }])
      expect((await lead.post(`/api/scenarios/${stirred.scenarioId}/runs`, {}, headers as Record<string, string>)).status).toBe(422)
  })
  it('leaves no gap in the numbers', async () => {
    const rows = await world.database.ask<{ number: number }>('select number from runs order by number')
    expect(rows.map(row => row.number)).toEqual(rows.map((_, i) => i + 1))
  })
})

/** Changes blocks, and makes the digest fit: only content can give them away. */
const forged = async (forge: (run: RunSave) => void, input = SMALL, seed = 'forged') => runBody(input, { seed, forge })

describe('a forgery', () => {
  it.each<[string, (run: RunSave) => void, string]>([
    ['more filled sites than there are', (run) => { run.blocks[0]!.filledSum[0]![3] = 6 * 50 + 1 }, 'blocks.0.filledSum.0.3'],
    ['a sum of squares that no counts have', (run) => { run.blocks[1]!.filledSumSq[1]![5] = 0 }, 'blocks.1.filledSum.1Sq.5'],
    ['filled sites that become fewer', (run) => { run.blocks[0]!.filledSum[0]![40] = run.blocks[0]!.filledSum[0]![0]!; run.blocks[0]!.filledSumSq[0]![40] = run.blocks[0]!.filledSumSq[0]![0]! }, 'blocks.0.filledSum.0.40'],
    ['more attachments than filled sites', (run) => { run.blocks[0]!.events[0]![7]! += 1 }, 'blocks.0.events.0'],
    ['exposure beyond the duration', (run) => { run.blocks[0]!.exposureSteps[0]![7] = 6 * 961 + 1 }, 'blocks.0.exposureSteps.0.7'],
    ['first attachments that do not add up', (run) => { run.blocks[0]!.firstAttachment[0]! += 1 }, 'blocks.0.firstAttachment'],
    ['a row too short', (run) => { run.blocks[2]!.events[1]!.pop() }, 'blocks.2.events.1'],
    ['a missing kind of site', (run) => { run.blocks[0]!.filledSum.pop() }, 'blocks.0.filledSum'],
    ['counts that this scenario does not have', (run) => { run.blocks[0]!.declinedExposure = run.blocks[0]!.exposureSteps }, 'blocks.0.declinedExposure'],
    ['a gap between blocks', (run) => { run.blocks.splice(1, 1) }, 'blocks.1.from'],
    ['another algorithm than the supply has', (run) => { run.engine.algorithm = 'step' }, 'engine.algorithm'],
    ['a claim to be partial', (run) => { run.partial = true }, 'partial'],
  ])('with %s is refused at its path, and nothing is stored', async (_, forge, path) => {
    const before = await runCount()
    const { status, body } = await save<Problem>(stirred, await forged(forge))
    expect([status, body.errors?.[0]?.path], JSON.stringify(body.errors)).toEqual([422, path])
    expect(await runCount()).toBe(before)
  })
  it('of the digest alone is refused', async () => {
    const run = await runBody(SMALL, { seed: 'digest' })
    const { status, body } = await save<Problem>(stirred, { ...run, digest: run.digest.replace(/^./, char => char === 'a' ? 'b' : 'a') })
    expect([status, body.errors?.[0]?.path]).toEqual([422, 'digest'])
  })
  it.each<[string, () => Promise<RunSave>]>([
    ['a tally moved by one site in one replicate, all sums made to fit', () => forged((run) => {
      const block = run.blocks[1]!
      block.exposureSteps[0]![4]! -= 1
    })],
    ['another seed\'s blocks', async () => {
      const run = await runBody(SMALL, { seed: 'the other' })
      run.seed = 'the stated'
      run.digest = digestOfRun(ScenarioSchema.parse(SMALL), run)
      return run
    }],
    ['another run\'s blocks in one place', async () => {
      const other = await runBody(SMALL, { seed: 'elsewhere' })
      return forged((run) => { run.blocks[2] = other.blocks[2]! }, SMALL, 'mostly right')
    }],
  ])('that is plausible is found by the audit: %s', async (_, make) => {
    const { status, body } = await save(stirred, await make())
    expect(status, JSON.stringify(body).slice(0, 300)).toBe(201)
    expect(body.audit.state).toBe('waiting')
    const audit = await audited(body)
    expect([audit.state, audit.at !== null]).toEqual(['refused', true])
    const [event] = await world.database.ask<{ note: string }>('select note from audit_events where run_id = $1 and kind = \'run-refused\'', [body.runId])
    expect(event!.note).toMatch(/^Block \d+ /)
  })
  it('of lattice tallies is found too', async () => {
    const { body } = await save(walked, await forged((run) => { run.blocks[0]!.exposureSteps[1]![0]! -= 1 }, WALKED))
    expect((await audited(body)).state).toBe('refused')
  })
  it('of the engine\'s version is not called reproducible', async () => {
    const { body } = await save(stirred, await forged((run) => { run.engine.version = '0.9.9' }))
    expect(await audited(body)).toMatchObject({ state: 'cannot', blocksRedrawn: 0, detection: 0 })
  })
})

describe('a run is not taken', () => {
  it('for a revision that is not there', async () => {
    const { status, body } = await save<Problem>(stirred, await runBody(SMALL, { revision: 2 }))
    expect([status, body.errors?.[0]?.path]).toEqual([422, 'revision'])
  })
  it('above 8 MB', async () => {
    const { status } = await save<Problem>(stirred, new Uint8Array(8 * 2 ** 20 + 1).fill(0x20))
    expect(status).toBe(413)
  })
  it('when a field is unknown, of a wrong type, or not a whole number', async () => {
    const run = await runBody(SMALL)
    const paths = async (body: unknown) => (await save<Problem>(stirred, body)).body.errors?.map(one => one.path)
    expect(await paths({ ...run, verified: true })).toEqual(['verified'])
    expect(await paths({ ...run, blocks: [{ ...run.blocks[0], events: [['1'], [0]] }] })).toEqual(['blocks.0.events.0.0'])
    expect(await paths({ ...run, blocks: [{ ...run.blocks[0], from: -1 }] })).toEqual(['blocks.0.from'])
    expect(await paths({ ...run, replicatesAsked: 10_000_000 })).toEqual(['replicatesAsked'])
    expect((await save<Problem>(stirred, '{"blocks": [')).status).toBe(400)
  })
  it('while others are answered: a body of 8 MB does not hold up a sign-in', async () => {
    const before = await runCount()
    const heavy = save<Problem>(stirred, `{"blocks":[${'[1],'.repeat(2_000_000)}[1]]}`)
    const started = performance.now()
    expect((await lead.get('/api/account/me')).status).toBe(200)
    expect(performance.now() - started).toBeLessThan(3000)
    expect((await heavy).status).toBe(422)
    expect(await runCount()).toBe(before)
  })
})

it('takes up audits that a killed server left', async () => {
  const { body } = await save(stirred, await runBody(SMALL, { seed: 'left behind' }))
  await audited(body)
  await world.database.ask('update runs set audit_state = \'waiting\', audit_blocks = 0, audit_at = null where run_id = $1', [body.runId])
  const { startServer } = await import('../support/server')
  const next = await startServer(world.database.applicationUrl)
  try {
    expect((await audited(body)).state).toBe('audited')
  } finally {
    await next.stop()
  }
})
