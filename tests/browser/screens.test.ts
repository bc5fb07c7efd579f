/** Every page: WCAG 2.2 AA by axe in light, dark and on a phone; no page wider than its window; a title, one heading, no inline handlers. */
import { AxeBuilder } from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { RunDetail } from '../../shared/schemas/api/run'
import { makeBench } from '../support/bench'
import { demoFile, keep, makeWeighUp } from '../support/recordings'
import { runBody } from '../support/runs'
import { arrive, type Visitor } from '../support/visitor'
import list from '../house/accessibility.json'
import { expectQuiet } from './support/browser'
import { CONTROL, enter, goButton, Pier } from './support/bench'

const RULES = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']
const DESKTOP = { width: 1440, height: 900 }, TABLET = { width: 820, height: 1100 }, PHONE = { width: 390, height: 844 }

let pier: Pier, fresh: Visitor, places: Record<string, string>
beforeAll(async () => {
  pier = await Pier.open({ NUXT_PUBLIC_DEMO_ACCOUNTS: 'true' })
  await pier.person('Second Person', 'trainee')
  const { scenarioId } = await pier.scenario({ title: 'Control, 200 ms step' })
  const edited = { ...CONTROL, title: 'Control, 200 ms step', notes: 'Changed once.' }
  await pier.lead.put(`/api/scenarios/${scenarioId}`, { document: { ...edited, schedule: { ...CONTROL.schedule, initialFill: 0.15 } }, message: 'Depletion as measured.' }, { 'if-match': '"1"' })
  for (const title of ['A title as long as people write them when they name the animal, the drug, its concentration and the day of the recording', 'Short', 'Übertragung & <b>marks</b>']) await pier.scenario({ title })
  const runs: string[] = []
  for (const seed of ['first', 'second']) {
    const saved = await pier.lead.post<RunDetail>(`/api/scenarios/${scenarioId}/runs`, await runBody(CONTROL, { seed, replicates: 100 }), { 'idempotency-key': `screens-${seed}-0001` })
    if (saved.status !== 201) throw new Error(`The run was not saved: ${saved.status} ${JSON.stringify(saved.body)}`)
    runs.push(saved.body.runId)
  }
  const kept = await keep(pier.lead, pier.benchId, demoFile('cells.csv')), recordingId = kept.body[0]!.recordingId
  places = {
    ':scenarioId': scenarioId, ':runId': runs[0]!, 'compare': `/compare?runs=${runs.join(',')}`, ':recordingId': recordingId, ':weighUpId': await makeWeighUp(pier.lead, pier.benchId, [recordingId]), 'weigh': `/weigh-ups/new?recordings=${recordingId}`,
  }
  fresh = await arrive(pier.world.database.db, pier.base, 'Fresh Person')
})
afterAll(() => pier?.close())

async function judge(page: Page, what: string): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).setLegacyMode(true).withTags(RULES).analyze()
  return violations.flatMap(one => one.nodes.map(node => `${what}: ${one.id} at ${node.target.join(' ')}: ${(node.failureSummary ?? one.help).replace(/\s+/g, ' ').slice(0, 300)}`))
}
/** Nothing sticks out to the right: what is wide scrolls inside its own frame. */
const tooWide = (page: Page, what: string) => page.evaluate((where) => {
  const over = document.documentElement.scrollWidth - innerWidth
  if (over <= 0) return []
  const widest = [...document.body.querySelectorAll('*')].filter(one => one.getBoundingClientRect().right > innerWidth + 1).slice(-3).map(one => `${one.tagName.toLowerCase()}.${one.className}`)
  return [`${where}: ${over} px wider than its window, for example ${widest.join(', ')}`]
}, what)
/** Everything in this page that axe, its width or its headings say; looked at in light, dark, on a tablet and on a phone. */
async function lookOver(page: Page): Promise<string[]> {
  await page.locator('main h1').filter({ hasText: /\S/ }).first().waitFor()
  await page.waitForLoadState('networkidle')
  const found: string[] = []
  if (!/\S.* · Moorage$|^Moorage$/.test(await page.title())) found.push(`title: “${await page.title()}”`)
  const headings = await page.locator('h1').allTextContents()
  if (headings.length !== 1 || !headings[0]!.trim()) found.push(`${headings.length} headings of the first level: ${headings.join(' | ')}`)
  for (const [what, size, colorScheme, axe] of [['light', DESKTOP, 'light', true], ['tablet', TABLET, 'light', false], ['phone', PHONE, 'light', true], ['dark', DESKTOP, 'dark', true]] as const) {
    await page.setViewportSize(size)
    await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' })
    await page.evaluate(async () => { for (let i = 0; i < 3; i++) await new Promise(requestAnimationFrame) })
    found.push(...await tooWide(page, what))
    if (axe) found.push(...await judge(page, what))
  }
  return found
}

const OPEN = new Set(['/', '/sign-in', '/register', '/almanac'])
describe('every page', () => {
  it.each(Object.entries(list.pages))('%s is accessible and fits its window', async (file, path) => {
    const address = file === 'compare.vue' ? places.compare! : file === 'weigh-ups/new.vue' ? places.weigh! : path.replace(/:\w+/g, name => places[name] ?? name)
    const { page, seen, leave } = await pier.seat(address, { who: OPEN.has(path) ? null : undefined })
    if (path.includes('scenarios/:scenarioId') || file === 'scenarios/new.vue') await page.locator('main table, [data-preview="drawn"]').first().waitFor()
    if (/weigh-ups\/(new|\[)|recordings\/\[/.test(file)) await page.locator('main table').first().waitFor()
    await page.locator('main h1').first().waitFor()
    expect(await lookOver(page)).toEqual([])
    expectQuiet(seen)
    await leave()
  })

  it('of a fresh account: no bench yet, then an empty one', async () => {
    const before = await pier.seat('/bench', { who: fresh })
    await before.page.locator('main h1').first().waitFor()
    expect(await lookOver(before.page)).toEqual([])
    expectQuiet(before.seen)
    await before.leave()
    await makeBench(pier.world, fresh, 'Empty pier')
    for (const path of ['/bench', '/scenarios', '/runs', '/recordings', '/weigh-ups']) {
      const { page, seen, leave } = await pier.seat(path, { who: fresh })
      await page.locator('main h1').first().waitFor()
      expect(await lookOver(page), path).toEqual([])
      expectQuiet(seen)
      await leave()
    }
  })

  it('of what is not there, or not one\'s own, is the same refusal and accessible', async () => {
    const texts: string[] = []
    for (const [path, who] of [['/scenarios/01890000-0000-7000-8000-000000000000', fresh], [`/scenarios/${places[':scenarioId']}`, fresh], ['/nowhere/at/all', null]] as const) {
      const { page, leave } = await pier.seat(path, { who, expected: [/status of 404/] })
      await page.locator('main h1').first().waitFor()
      texts.push((await page.locator('main').innerText()).replace(/\s+/g, ' '))
      expect(await lookOver(page), path).toEqual([])
      await leave()
    }
    expect(texts[1]).toBe(texts[0])
  })

  it('of a file that is being read, line by line', async () => {
    const { page, seen, leave } = await pier.seat('/recordings/import')
    await page.setInputFiles('input[type=file]', { name: 'control_messy.csv', mimeType: 'text/csv', buffer: demoFile('control_messy.csv') })
    await page.locator('table.import').waitFor()
    expect(await lookOver(page)).toEqual([])
    expectQuiet(seen)
    await leave()
  })

  it('of a run under way, on the front page and on its own', async () => {
    const front = await pier.seat('/', { who: null })
    await front.page.locator('label').filter({ hasText: /^\s*held\s*$/ }).click()
    await front.page.getByRole('button', { name: 'Set going', exact: true }).click()
    await front.page.locator('figure svg path.sim').waitFor()
    expect(await lookOver(front.page)).toEqual([])
    await front.leave()
    const { page, seen, leave } = await pier.seat(`/scenarios/${places[':scenarioId']}`)
    await page.locator('[data-path="algorithm"] label').filter({ hasText: /^\s*step\s*$/ }).click()
    await enter(page, 'replicates', '20000')
    await goButton(page).click()
    await page.waitForURL('**/runs/under-way/*')
    await page.locator('figure svg path.sim').first().waitFor()
    expect(await lookOver(page)).toEqual([])
    expectQuiet(seen)
    await leave()
  })
})

it('runs no handler that stands in the markup, and says so to the browser', async () => {
  const { page, leave } = await pier.seat('/', { who: null, expected: [/Content Security Policy/] })
  const found = await page.evaluate(async () => {
    const refused = new Promise<string>((resolve) => {
      document.addEventListener('securitypolicyviolation', event => resolve(event.effectiveDirective), { once: true })
    })
    document.body.insertAdjacentHTML('beforeend', '<button id="odd" onclick="window.moorageOdd = true">odd</button>')
    document.getElementById('odd')!.click()
    return { refused: await refused, ran: 'moorageOdd' in window }
  })
  expect(found).toEqual({ refused: 'script-src-attr', ran: false })
  await leave()
})
