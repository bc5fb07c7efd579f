/** The editor: what is typed is read, kept and restored; two people; the history; files. */
import { readFile } from 'node:fs/promises'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Download, Page } from 'playwright-core'
import type { RevisionDetail, ScenarioDetail } from '../../shared/schemas/api/scenario'
import { alive, eventually, expectQuiet, visit, words } from './support/browser'
import { box, enter, goButton, note, Pier } from './support/bench'

const QUICK = 'sites.0.attachProbability'
const where = (page: Page) => page.locator('p.where').first()
const draftKept = (page: Page) => page.getByText(/draft kept/).first().waitFor()
const read = async (pier: Pier, scenarioId: string) => (await pier.lead.get<ScenarioDetail>(`/api/scenarios/${scenarioId}`)).body

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
})
afterAll(() => pier?.close())

it('reads a decimal comma and shows it back, keeps what is wrong, and names the number of fields on the button', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0,25')
  expect(await box(page, QUICK).inputValue()).toBe('0.25')
  expect(await words(note(page, QUICK))).toContain('Read from “0,25”.')
  expect(await words(page.locator('h1'))).toMatch(/quick sites should lengthen 1\.20 times against revision 1: (0\.833 s|833 ms) to 1\.00? s/)

  await enter(page, QUICK, '30')
  expect(await words(note(page, QUICK))).toMatch(/between 0 and 1\..*30 %.*0\.3/)
  await enter(page, QUICK, '1.25')
  expect(await box(page, QUICK).inputValue()).toBe('1.25')
  expect(await box(page, QUICK).getAttribute('aria-invalid')).toBe('true')
  expect(await words(goButton(page))).toBe('Set going: fix 1 field first')
  await enter(page, 'medium.diffusionUm2PerS', '-3')
  expect(await words(goButton(page))).toBe('Set going: fix 2 fields first')
  await goButton(page).click({ force: true })
  expect(await page.evaluate(() => document.activeElement?.closest('[data-path]')?.getAttribute('data-path'))).toBe('medium.diffusionUm2PerS')
  expect(new URL(page.url()).pathname).toBe(`/scenarios/${scenarioId}`)
  expect(await pier.savedRuns(scenarioId)).toEqual([])
  expectQuiet(seen)
  await leave()
})

/** Typed where, what, and what is said below the box: bad inputs of every kind keep their text and never become a number. */
const WRONG: [path: string, typed: string, said: RegExp][] = [
  [QUICK, '-0.1', /between 0 and 1/], [QUICK, '1.0001', /between 0 and 1/], [QUICK, '2', /between 0 and 1/],
  [QUICK, '', /missing|enter|number/i], [QUICK, '   ', /missing|enter|number/i],
  [QUICK, '0x10', /./], [QUICK, 'Infinity', /./], [QUICK, 'NaN', /./], [QUICK, '1e400', /./], [QUICK, '1.2.3', /./], [QUICK, '5;', /./],
  ['medium.diffusionUm2PerS', '0', /Allowed|above/], ['medium.diffusionUm2PerS', '-0.1', /Allowed|above/],
  ['medium.spacingNm', '50000', /Allowed/], ['medium.densityPerUm3', '8000', /ccupancy/],
  ['ribbon.rows', '0', /Allowed/], ['ribbon.rows', '12.5', /whole number/], ['ribbon.rows', '-3', /Allowed/], ['ribbon.rows', '1000000000', /Allowed.*200/],
  ['schedule.initialFill', '1.2', /between 0 and 1/], ['schedule.durationS', '0', /Allowed|at least|steps/],
  ['schedule.sampleEveryMs', '0.000001', /20.?000|samples/],
  ['replicates', '0', /Allowed/], ['replicates', '10000000', /Allowed.*1.?000.?000/],
]
it('keeps every unusable text as typed, says what is wanted, and starts nothing', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  const missed: string[] = []
  for (const [path, typed, said] of WRONG) {
    const before = await box(page, path).inputValue()
    await enter(page, path, typed)
    const state = {
      text: await box(page, path).inputValue(), invalid: await box(page, path).getAttribute('aria-invalid'),
      note: await words(note(page, path)).catch(() => ''), go: await words(goButton(page)),
    }
    if (state.text.trim() !== typed.trim() || state.invalid !== 'true' || !said.test(state.note) || !/fix \d+ field/.test(state.go)) missed.push(`${path} ${JSON.stringify(typed)}: ${JSON.stringify(state)}`)
    await enter(page, path, before)
  }
  expect(missed).toEqual([])
  expect(await words(goButton(page))).toMatch(/^Set going$/)

  await enter(page, QUICK, '０．２')
  expect(await box(page, QUICK).inputValue()).toBe('0.2')
  await box(page, 'seed').fill('s'.repeat(5000))
  expect(await words(note(page, 'seed'))).toContain('A seed has at most 200 characters; this has 5000.')
  expect(await words(goButton(page))).toMatch(/fix \d+ field/)
  await box(page, 'seed').fill('🌊 9007199254740993')
  expect(await box(page, 'seed').inputValue()).toBe('🌊 9007199254740993')
  expectQuiet(seen)
  await leave()
})

it('takes zero attachment and says that no site refills; cautions stand beside what is unusual', async () => {
  const { scenarioId } = await pier.scenario({ sites: [{ name: 'site', share: 1, attachProbability: 0.3 }] })
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0')
  await eventually(() => words(page.locator('h1'))).toContain('no site ever refills')
  expect(await words(goButton(page))).toMatch(/^Set going$/)
  await enter(page, QUICK, '0.3')
  await enter(page, 'medium.diffusionUm2PerS', '50')
  await eventually(() => words(note(page, 'medium.diffusionUm2PerS'))).toMatch(/faster than a free sphere|above|range/i)
  expect(await box(page, 'medium.diffusionUm2PerS').getAttribute('aria-invalid')).toBeNull()
  await enter(page, 'medium.diffusionUm2PerS', '0.1')
  await enter(page, 'schedule.initialFill', '0')
  await eventually(() => words(page.locator('main'))).toMatch(/nothing to refill/i)
  expectQuiet(seen)
  await leave()
})

it('shows one stored length in both units and makes no revision of it', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  const unit = page.locator('[data-path="medium.spacingNm"] select')
  await unit.selectOption('µm')
  expect(await box(page, 'medium.spacingNm').inputValue()).toBe('0.05')
  await enter(page, 'medium.spacingNm', '0,05')
  await unit.selectOption('nm')
  expect(await box(page, 'medium.spacingNm').inputValue()).toBe('50')
  expect(await words(where(page))).not.toContain('edited')
  await unit.selectOption('µm')
  await enter(page, 'medium.spacingNm', '0,045')
  await page.keyboard.press('Alt+S')
  await eventually(async () => (await read(pier, scenarioId)).revision).toBe(2)
  expect((await read(pier, scenarioId)).document.medium.spacingNm).toBe(45)
  expectQuiet(seen)
  await leave()
})

it('restores a draft after the page was killed within two seconds of typing', async () => {
  const { scenarioId } = await pier.scenario()
  const { context, page, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0.17')
  await enter(page, 'schedule.durationS', 'sixty')
  const typedAt = performance.now()
  await page.waitForFunction(() => Object.values(localStorage).some(text => String(text).includes('sixty')))
  expect(performance.now() - typedAt).toBeLessThan(2000 * 4)
  const crashed = page.waitForEvent('crash')
  await page.goto('chrome://crash').catch(() => undefined)
  await crashed
  const again = await context.newPage()
  await visit(again, `${pier.base}/scenarios/${scenarioId}`)
  await eventually(() => box(again, QUICK).inputValue()).toBe('0.17')
  expect(await box(again, 'schedule.durationS').inputValue()).toBe('sixty')
  expect(await words(where(again))).toContain('edited and not saved')
  expect(await words(goButton(again))).toBe('Set going: fix 1 field first')
  await pier.reload(again)
  await eventually(() => box(again, QUICK).inputValue()).toBe('0.17')
  await again.getByRole('button', { name: 'Go back to revision 1' }).click()
  expect(await box(again, QUICK).inputValue()).toBe('0.3')
  await pier.reload(again)
  expect(await box(again, QUICK).inputValue()).toBe('0.3')
  await leave()
})

it('keeps apart what two tabs of one person type', async () => {
  const { scenarioId } = await pier.scenario()
  const { context, page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  const second = await context.newPage()
  await visit(second, `${pier.base}/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0.17')
  await draftKept(page)
  await enter(second, 'medium.densityPerUm3', '650')
  await draftKept(second)
  const held = async (tab: Page) => {
    await pier.reload(tab)
    await draftKept(tab)
    return [await box(tab, QUICK).inputValue(), await box(tab, 'medium.densityPerUm3').inputValue()]
  }
  expect(await held(page)).toEqual(['0.17', '800'])
  expect(await held(second)).toEqual(['0.3', '650'])
  expectQuiet(seen)
  await leave()
})

it('says at once that a kept draft was made from an earlier revision than the newest', async () => {
  const { scenarioId, document } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0.17')
  await draftKept(page)
  const other = await pier.person('Quicker Person', 'member')
  expect((await other.put(`/api/scenarios/${scenarioId}`, { document: { ...document, notes: 'Quicker.' } }, { 'if-match': '"1"' })).status).toBe(200)
  await pier.reload(page)
  const alert = page.getByRole('alert').filter({ hasText: 'Saved meanwhile' })
  await alert.waitFor()
  expect(await words(alert)).toMatch(/Quicker Person saved revision 2 at\s+\d\d:\d\d, while you were editing revision 1/)
  expect(await box(page, QUICK).inputValue()).toBe('0.17')
  expectQuiet(seen)
  await leave()
})

it('undoes and redoes by key, field by field', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0.2')
  await enter(page, 'medium.densityPerUm3', '600')
  await page.keyboard.press('Control+z')
  await eventually(() => box(page, 'medium.densityPerUm3').inputValue()).toBe('800')
  expect(await box(page, QUICK).inputValue()).toBe('0.2')
  await page.keyboard.press('Control+z')
  await eventually(() => box(page, QUICK).inputValue()).toBe('0.3')
  expect(await words(where(page))).not.toContain('edited')
  await page.keyboard.press('Control+y')
  await page.keyboard.press('Control+y')
  await eventually(() => box(page, 'medium.densityPerUm3').inputValue()).toBe('600')
  expect(await box(page, QUICK).inputValue()).toBe('0.2')
  expectQuiet(seen)
  await leave()
})

it('tells the second of two people who saved and when, and keeps theirs as a copy', async () => {
  const { scenarioId } = await pier.scenario()
  const other = await pier.person('Second Person', 'member')
  const first = await pier.seat(`/scenarios/${scenarioId}`)
  const second = await pier.seat(`/scenarios/${scenarioId}`, { who: other, expected: [/status of 412/] })
  await enter(second.page, QUICK, '0.11')
  await enter(first.page, QUICK, '0.22')
  await first.page.getByRole('button', { name: 'Save as revision 2' }).click()
  await eventually(async () => (await read(pier, scenarioId)).revision).toBe(2)
  await second.page.getByRole('button', { name: 'Save as revision 2' }).click()
  const alert = second.page.getByRole('alert').filter({ hasText: 'Saved meanwhile' })
  await alert.waitFor()
  expect(await words(alert)).toMatch(/Lead Person saved revision 2 at\s+\d\d:\d\d, while you were editing revision 1/)
  expect(await alert.locator('tbody tr').allTextContents()).toHaveLength(1)
  expect(await words(alert.locator('tbody tr'))).toMatch(/0\.22.*0\.11/s)
  expect(await box(second.page, QUICK).inputValue()).toBe('0.11')
  await alert.getByRole('button', { name: 'Keep mine as a copy' }).click()
  await second.page.waitForURL(url => /^\/scenarios\/[0-9a-f-]{36}$/.test(url.pathname) && !url.pathname.endsWith(scenarioId))
  const copy = await read(pier, new URL(second.page.url()).pathname.split('/').at(-1)!)
  expect(copy.document.sites[0]!.attachProbability).toBe(0.11)
  expect(copy.createdBy).toContain('Second Person')
  expect((await read(pier, scenarioId)).document.sites[0]!.attachProbability).toBe(0.22)
  await eventually(() => box(second.page, QUICK).inputValue()).toBe('0.11')
  expectQuiet(first.seen)
  expectQuiet(second.seen)
  await Promise.all([first.leave(), second.leave()])
})

it('tells what each revision changed and makes an earlier one the newest again', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, QUICK, '0.2')
  await page.getByRole('textbox', { name: 'What changed and why' }).fill('As measured with the short step.')
  await page.getByRole('button', { name: 'Save as revision 2' }).click()
  const history = page.locator('section').filter({ has: page.getByRole('heading', { name: 'History' }) })
  await eventually(() => history.locator('li').count()).toBe(2)
  await eventually(() => words(history.locator('li').first())).toMatch(/“As measured with the short step\.”.*0\.3.*0\.2/s)
  await history.getByRole('link', { name: 'Revision 1' }).click()
  const row = page.locator('section').filter({ hasText: 'What the newest revision changed' }).locator('tbody tr')
  await row.first().waitFor()
  expect(await row.count()).toBe(1)
  expect(await words(row)).toMatch(/attachment.*0\.3.*0\.2/s)
  await page.getByRole('button', { name: 'Make it the newest again' }).click()
  await eventually(async () => (await read(pier, scenarioId)).revision).toBe(3)
  const [first, third] = await Promise.all([1, 3].map(async revision => (await pier.lead.get<RevisionDetail>(`/api/scenarios/${scenarioId}/revisions/${revision}`)).body))
  expect(third!.digest).toBe(first!.digest)
  await page.waitForURL(`**/scenarios/${scenarioId}`)
  await eventually(() => box(page, QUICK).inputValue()).toBe('0.3')
  expectQuiet(seen)
  await leave()
})

async function textOf(download: Download): Promise<string> {
  return readFile(await download.path(), 'utf8')
}
it('exports a scenario as JSON and brings it in again, digest for digest; a broken file stores nothing', async () => {
  const scenario = await pier.scenario({ title: 'Out and in' })
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenario.scenarioId}`)
  const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: 'Export as JSON' }).click()])
  expect(download.suggestedFilename()).toBe('out-and-in.json')
  const text = await textOf(download)
  expect(JSON.parse(text)).toEqual(scenario.document)

  await visit(page, `${pier.base}/scenarios`)
  const before = await pier.counts()
  const file = page.locator('input[type=file]')
  await file.setInputFiles({ name: 'broken.json', mimeType: 'application/json', buffer: Buffer.from(text.replace('"attachProbability": 0.3', '"attachProbability": 3, "odd": 1')) })
  await page.getByText(/Not imported\./).waitFor()
  expect(await words(page.locator('main'))).toMatch(/sites\.0\.odd/)
  expect(await pier.counts()).toEqual(before)
  await file.setInputFiles({ name: 'good.json', mimeType: 'application/json', buffer: Buffer.from(text) })
  await page.waitForURL(/\/scenarios\/[0-9a-f-]{36}$/)
  await alive(page)
  const made = await read(pier, new URL(page.url()).pathname.split('/').at(-1)!)
  expect(made.scenarioId).not.toBe(scenario.scenarioId)
  expect(made.digest).toBe(scenario.digest)
  expectQuiet(seen)
  await leave()
})
