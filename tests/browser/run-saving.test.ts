/** Saving: once and only once, over a lost connection, a lost answer, a closed tab, a full disk; and a trainee's run, which is not saved and says why. */
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { BrowserContext, Page } from 'playwright-core'
import { expectQuiet, visit, words } from './support/browser'
import { atSavedRun, box, enter, goButton, Pier } from './support/bench'

const OFFLINE = [/ERR_INTERNET_DISCONNECTED/, /ERR_FAILED/, /ERR_CONNECTION_RESET/]
/** Seconds of step-by-step walk: long enough to lose the connection meanwhile. */
const SLOW = { ribbon: { shape: 'plate', rows: 2, columns: 3, faces: 2, classLayout: 'interleaved' }, reservoir: { supply: 'held', marginSites: 6 }, schedule: { durationS: 20, sampleEveryMs: 100, initialFill: 0 } } as const
const state = (page: Page) => page.getByText(/Not yet sent\.|^\s*Saved \d\d:\d\d|Not saved on the bench/).first()
const said = (page: Page) => words(page.locator('main'))

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
})
afterAll(() => pier?.close())

async function go(page: Page, options: { seed: string, replicates?: number, step?: boolean }) {
  if (options.replicates) await enter(page, 'replicates', String(options.replicates))
  if (options.step) await page.locator('[data-path="algorithm"] label').filter({ hasText: /^\s*step\s*$/ }).click()
  await box(page, 'seed').fill(options.seed)
  await goButton(page).click()
  await page.waitForURL('**/runs/**')
}
/** The bench takes no runs: its server cannot be reached for that one thing. */
const cutOff = (context: BrowserContext) => context.route('**/api/scenarios/*/runs', route => route.request().method() === 'POST' ? route.abort() : route.continue())

it('saves a finished run and says when', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await go(page, { seed: 'plain' })
  const runId = await atSavedRun(page)
  expect(await pier.savedRuns(scenarioId)).toMatchObject([{ runId, partial: false, replicates: 200 }])
  await page.locator('dd').filter({ hasText: /^\s*audited\s*$/ }).waitFor({ timeout: 60_000 })
  expect(await said(page)).toMatch(/Saved\s*today, \d\d:\d\d, by Lead Person/)
  expectQuiet(seen)
  await leave()
})

it('keeps a run that finishes without a connection and sends it once when the connection is back', async () => {
  const { scenarioId } = await pier.scenario(SLOW)
  const { context, page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`, { expected: OFFLINE })
  await go(page, { seed: 'offline', replicates: 1500, step: true })
  await page.locator('figure svg path.sim').first().waitFor()
  expect(new URL(page.url()).pathname).toContain('/under-way/')
  await page.locator('h1').filter({ hasText: /^\s*[1-9].* of 1.?500/ }).waitFor() // the workers walk: what they need is here
  await context.setOffline(true)
  await page.getByText('No connection.').first().waitFor()
  await page.getByText('Not yet sent.').waitFor()
  expect(await said(page)).toMatch(/Not yet sent\. No connection; it is sent when the connection is back\. It is kept on this device\./)
  expect(await words(page.locator('p.kind'))).toMatch(/closed form|Undecided/)
  expect(await pier.savedRuns(scenarioId)).toEqual([])
  await context.setOffline(false)
  await page.getByText(/Saved \d\d:\d\d/).waitFor()
  const saved = await pier.savedRuns(scenarioId)
  expect(saved).toMatchObject([{ replicates: 1500, partial: false }])
  await page.getByRole('link', { name: 'Open it on the bench' }).click()
  expect(await atSavedRun(page)).toBe(saved[0]!.runId)
  expectQuiet(seen)
  await leave()
})

it('sends a run whose answer was lost again, and the bench has it once', async () => {
  const { scenarioId } = await pier.scenario()
  const { context, page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`, { expected: OFFLINE })
  let lost = 0
  await context.route('**/api/scenarios/*/runs', async (route) => {
    if (route.request().method() !== 'POST' || lost > 0) return route.continue()
    lost += 1
    await route.fetch()
    await route.abort('connectionreset')
  })
  await go(page, { seed: 'lost answer' })
  await page.getByText('Not yet sent.').waitFor()
  expect(await pier.savedRuns(scenarioId)).toHaveLength(1)
  await page.getByText(/Saved \d\d:\d\d/).waitFor()
  expect(lost).toBe(1)
  expect(await pier.savedRuns(scenarioId)).toHaveLength(1)
  expectQuiet(seen)
  await leave()
})

it('saves nothing under the name of another account that signed in meanwhile, and follows a sign-out in another tab', async () => {
  const { scenarioId } = await pier.scenario(SLOW)
  const [first, other] = [await pier.person('First At The Rig', 'member'), await pier.person('Next At The Rig', 'member')]
  const { context, page, leave } = await pier.seat(`/scenarios/${scenarioId}`, { who: first, expected: [/status of 401/] })
  await go(page, { seed: 'whose', replicates: 400, step: true })
  await page.locator('h1').filter({ hasText: /^\s*[1-9].* of 400/ }).waitFor()
  const [name, value] = other.cookie.split(/=(.*)/s) as [string, string]
  const [mine] = (await context.cookies()).filter(cookie => cookie.name === name)
  await context.addCookies([{ name, value, url: pier.base, httpOnly: true, sameSite: 'Lax' }])
  await page.getByText('Not yet sent.').waitFor()
  expect(await said(page)).toContain('You are signed out; it is sent after you sign in again.')
  expect(await pier.savedRuns(scenarioId)).toEqual([])
  await context.addCookies([{ name, value: mine!.value, url: pier.base, httpOnly: true, sameSite: 'Lax' }])
  await page.getByText(/Saved \d\d:\d\d/).waitFor()
  const [saved] = await pier.savedRuns(scenarioId)
  expect((await pier.run(saved!.runId)).savedBy).toContain('First At The Rig')

  const second = await context.newPage()
  await visit(second, `${pier.base}/account`)
  await second.getByRole('button', { name: 'Sign out', exact: true }).click()
  await page.waitForURL('**/sign-in**')
  await leave()
})

it('finds an unsent run again after the tab was closed, and sends it', async () => {
  const { scenarioId } = await pier.scenario()
  const { context, page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`, { expected: OFFLINE })
  await cutOff(context)
  await go(page, { seed: 'closed tab' })
  await page.getByText('Not yet sent.').waitFor()
  const address = page.url()
  expect(await said(page)).toContain('It is kept on this device.')
  await page.close()
  expect(await pier.savedRuns(scenarioId)).toEqual([])
  await context.unroute('**/api/scenarios/*/runs')
  const again = await context.newPage()
  await visit(again, address)
  await again.getByText(/Saved \d\d:\d\d/).waitFor()
  expect(await pier.savedRuns(scenarioId)).toHaveLength(1)
  expectQuiet(seen)
  await leave()
})

it('tells a full or closed storage, runs on in memory, and breaks nothing', async () => {
  const { scenarioId } = await pier.scenario()
  const { context, page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`, {
    expected: OFFLINE,
    script: () => {
      const full = () => {
        throw new DOMException('The quota has been exceeded.', 'QuotaExceededError')
      }
      IDBFactory.prototype.open = full
      Storage.prototype.setItem = full
    },
  })
  await enter(page, 'sites.0.attachProbability', '0.2')
  await page.getByText('This browser keeps no draft: its storage is full or closed.').waitFor()
  await page.getByRole('button', { name: 'Go back to revision 1' }).click()
  await cutOff(context)
  await go(page, { seed: 'no storage' })
  await page.getByText('Not yet sent.').waitFor()
  expect(await said(page)).toMatch(/This browser keeps nothing \(private mode, or its storage is full\): it stays in this page’s memory/)
  const warned = page.waitForEvent('dialog')
  await page.close({ runBeforeUnload: true })
  await (await warned).dismiss()
  await context.unroute('**/api/scenarios/*/runs')
  await page.getByRole('button', { name: 'Send now' }).click()
  await page.getByText(/Saved \d\d:\d\d/).waitFor()
  expect(await pier.savedRuns(scenarioId)).toHaveLength(1)
  expectQuiet(seen)
  await leave()
})

it('does not save a trainee\'s run and says why before and after', async () => {
  const { scenarioId } = await pier.scenario()
  const trainee = await pier.person('Trainee Person', 'trainee')
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`, { who: trainee, expected: [/status of 409/] })
  expect(await said(page)).toMatch(/trainees write down what they expect first/i)
  await go(page, { seed: 'not yet' })
  await state(page).waitFor()
  expect(await said(page)).toMatch(/Not saved on the bench.*(Trainees write down what they expect first|predictions come with the ledger)/i)
  expect(await words(page.locator('p.kind'))).toMatch(/closed form|Undecided/)
  expect(await pier.savedRuns(scenarioId)).toEqual([])
  expectQuiet(seen)
  await leave()
})
