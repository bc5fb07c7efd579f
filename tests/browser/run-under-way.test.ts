/** A run under way: it grows, answers, goes on while one moves about, warns before it would be lost, and stops within a second. */
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { ScenarioSchema } from '../../shared/schemas/scenario'
import { blockDigest } from '../../shared/walk/digest'
import { runInNode } from '../../workers/node'
import { alive, eventually, expectQuiet, words } from './support/browser'
import { atSavedRun, box, CONTROL, enter, goButton, Pier } from './support/bench'
import { SLACK } from './support/stopwatch'

/** Some 4 ms a replicate by the step-by-step walk: minutes for all of them, a curve within seconds. */
const LONG = { ribbon: { shape: 'plate', rows: 2, columns: 3, faces: 2, classLayout: 'interleaved' }, reservoir: { supply: 'held', marginSites: 6 }, schedule: { durationS: 20, sampleEveryMs: 100, initialFill: 0 } } as const
const REPLICATES = 20_000

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
})
afterAll(() => pier?.close())

/** Replicates done by the sentence on top. */
const done = async (page: Page) => Number(/^\s*([\d\s,.\u202f\u00a0]+?) of /.exec(await words(page.locator('h1')))?.[1]?.replace(/\D/g, '') ?? Number.NaN)
const curve = (page: Page) => page.locator('figure svg path.sim').first().getAttribute('d')

async function setGoing(seed: string) {
  const { scenarioId, document: scenario } = await pier.scenario(LONG)
  const seat = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(seat.page, 'replicates', String(REPLICATES))
  await box(seat.page, 'seed').fill(seed)
  await seat.page.locator('[data-path="algorithm"] label').filter({ hasText: /^\s*step\s*$/ }).click()
  await goButton(seat.page).click()
  await seat.page.waitForURL('**/runs/under-way/*')
  // The editor, with a curve of its own, stays until this page has taken its place.
  await eventually(() => done(seat.page)).toBeGreaterThan(0)
  await seat.page.locator('figure svg path.sim').first().waitFor()
  return { ...seat, scenarioId, scenario }
}

it('grows with its band, answers meanwhile, stops within a second and keeps the prefix as partial', async () => {
  const { page, seen, leave, scenarioId, scenario } = await setGoing('to be stopped')
  const [early, first] = [await done(page), await curve(page)]
  await eventually(() => done(page)).toBeGreaterThan(early)
  await eventually(() => curve(page)).not.toBe(first)
  expect(await page.locator('figure svg path.sim-band').first().getAttribute('d')).toMatch(/^M/)
  await eventually(() => page.locator('figure canvas').count()).toBeGreaterThan(0)

  const reactions = await page.evaluate(async () => {
    const took: number[] = []
    for (const word of ['linear', 'log', 'linear', 'log', 'linear', 'log', 'linear', 'log']) {
      const path = () => document.querySelector('figure svg path.exp')!.getAttribute('d')
      const before = path(), startedAt = performance.now()
      const button = [...document.querySelectorAll('button')].find(one => one.textContent?.trim() === word)!
      button.click()
      while (path() === before && performance.now() - startedAt < 5000) await new Promise(requestAnimationFrame)
      took.push(performance.now() - startedAt)
    }
    return took
  })
  console.log(`during a run: the axis turns within ${Math.max(...reactions).toFixed(0)} ms at most`)
  expect(Math.max(...reactions)).toBeLessThan(100 * SLACK)

  const sent = page.waitForRequest(request => request.method() === 'POST' && request.url().endsWith(`/api/scenarios/${scenarioId}/runs`))
  const pressedAt = performance.now()
  await page.getByRole('button', { name: /^Stop here, keep/ }).click()
  await sent
  const stoppedMs = performance.now() - pressedAt
  console.log(`stopped, its outcome made and being sent ${stoppedMs.toFixed(0)} ms after the press`)
  expect(stoppedMs).toBeLessThan(1000 * SLACK)

  const run = await pier.run(await atSavedRun(page))
  expect(await words(page.locator('p.kind'))).toMatch(/partial\s*, \d+ of 20.?000 replicates/)
  expect(run).toMatchObject({ partial: true, replicatesAsked: REPLICATES, replicates: run.outcome.blocks.at(-1)!.to })
  expect(run.replicates).toBeLessThan(REPLICATES)
  expect(run.outcome.blocks.map(block => block.from)).toEqual([0, ...run.outcome.blocks.slice(0, -1).map(block => block.to)])
  const first200 = run.outcome.blocks.filter(block => block.to <= 200)
  const here = await runInNode({ scenario: ScenarioSchema.parse(scenario), seed: 'to be stopped', replicates: first200.at(-1)!.to, algorithm: 'step', ranges: first200.map(({ from, to }) => ({ from, to })) }, { workers: 1 })
  expect(first200.map(block => block.digest)).toEqual(here.blocks.map(blockDigest))
  expectQuiet(seen)
  await leave()
})

it('goes on while its person moves about, and warns before the tab is closed', async () => {
  const { page, seen, leave, scenarioId } = await setGoing('to be left alone')
  await page.getByRole('link', { name: 'Leave it running, go on working' }).click()
  await page.waitForURL(`**/scenarios/${scenarioId}`)
  await page.getByRole('navigation').first().getByRole('link', { name: 'Bench', exact: true }).click()
  await page.waitForURL('**/bench')
  const line = page.locator('section').filter({ has: page.getByRole('heading', { name: 'Under way' }) }).locator('li')
  const replicates = async () => Number(/(\d+) of 20.?000 replicates/.exec(await words(line))?.[1])
  const before = await replicates()
  await eventually(replicates).toBeGreaterThan(before)

  const warned = page.waitForEvent('dialog')
  await page.close({ runBeforeUnload: true })
  const dialog = await warned
  expect(dialog.type()).toBe('beforeunload')
  await dialog.dismiss()
  const kept = await replicates()
  await eventually(replicates).toBeGreaterThan(kept)

  await line.getByRole('link').click()
  await page.waitForURL('**/runs/under-way/*')
  await page.keyboard.press('Escape')
  await atSavedRun(page)
  const dialogs: string[] = []
  page.on('dialog', (one) => {
    dialogs.push(one.type())
    void one.accept()
  })
  await Promise.all([page.waitForEvent('close'), page.close({ runBeforeUnload: true })])
  expect(dialogs).toEqual([])
  expectQuiet(seen)
  await leave()
})

it('ends at the precision that was asked for', async () => {
  const { scenarioId } = await pier.scenario({ ...CONTROL, title: 'To a precision' })
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await page.locator('label').filter({ hasText: /^\s*a precision\s*$/ }).click()
  await enter(page, 'replicates', '20000')
  await enter(page, 'standardError', '0.02')
  await goButton(page).click()
  const run = await pier.run(await atSavedRun(page))
  await alive(page)
  expect(run.replicates).toBeLessThan(20_000)
  const { low, high } = run.outcome.ratio
  expect((high! - low!) / 2 / 1.96).toBeLessThan(0.02 * 1.3) // two ways to an error: jackknife on the way, resampling at the end
  expectQuiet(seen)
  await leave()
})
