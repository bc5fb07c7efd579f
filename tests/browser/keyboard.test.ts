/** The main job by keyboard alone: to the field, a number, what to expect, the run, the outcome; focus is always seen. */
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { eventually, expectQuiet, words } from './support/browser'
import { atSavedRun, Pier } from './support/bench'

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
})
afterAll(() => pier?.close())

/** Where the focus stands, and whether a person sees it. */
const focus = (page: Page) => page.evaluate(() => {
  const on = document.activeElement as HTMLElement | null
  if (!on || on === document.body) return null
  const ringed = on.closest<HTMLElement>('.choice') ?? on
  const ring = [on, ringed].map(one => getComputedStyle(one)).find(style => style.outlineStyle !== 'none' && parseFloat(style.outlineWidth) >= 1)
  const place = on.getBoundingClientRect()
  return {
    path: on.closest('[data-path]')?.getAttribute('data-path') ?? '', words: (on.textContent || on.getAttribute('aria-label') || on.id).trim().slice(0, 60),
    ring: ring !== undefined, onScreen: place.bottom > 0 && place.top < innerHeight && place.right > 0 && place.left < innerWidth,
  }
})
/** Presses Tab until the focus is in a field; every stop on the way must be visible. */
async function tabTo(page: Page, path: string): Promise<number> {
  for (let presses = 1; presses <= 120; presses++) {
    await page.keyboard.press('Tab')
    const at = await focus(page)
    if (at) expect(at, `stop ${presses}`).toMatchObject({ ring: true, onScreen: true })
    if (at?.path === path) return presses
  }
  throw new Error(`120 presses of Tab did not reach ${path}.`)
}

it('goes from the field to the outcome with keys only, and the estimate doubles before the run', async () => {
  const { scenarioId } = await pier.scenario({ reservoir: { supply: 'stirred' } })
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  const stops = await tabTo(page, 'sites.0.attachProbability')
  await page.keyboard.press('Control+a')
  await page.keyboard.type('0.15')
  await page.keyboard.press('Enter')
  await eventually(() => words(page.locator('h1'))).toMatch(/quick sites should double against revision 1: (0\.833 s|833 ms) to 1\.67 s by the closed form/)
  await tabTo(page, 'seed')
  await page.keyboard.type('by keys')
  await page.keyboard.press('Control+Enter')
  const run = await pier.run(await atSavedRun(page))
  console.log(`keyboard: ${stops} stops to the attachment probability`)
  expect(run.revision).toBe(2)
  expect(run.seed).toBe('by keys')
  const { valueS, lowS, highS } = run.outcome.classes[0]!.tau
  expect(Math.abs(valueS! - 1 / 0.6)).toBeLessThan(highS! - lowS!) // about four standard errors
  await eventually(() => words(page.locator('h1'))).toContain('The walk agrees with the closed form')
  await page.keyboard.press('Tab')
  expect(await focus(page)).toMatchObject({ ring: true })
  expectQuiet(seen)
  await leave()
})

it('skips to the content first and lists its keys', async () => {
  const { page, seen, leave } = await pier.seat('/scenarios')
  await page.keyboard.press('Tab')
  expect((await focus(page))!.words).toBe('To the content')
  await page.keyboard.press('Enter')
  expect(await page.evaluate(() => document.activeElement?.id)).toBe('content')
  await page.keyboard.press('?')
  const sheet = page.getByRole('dialog')
  await sheet.waitFor()
  expect(await words(sheet)).toContain('open this list')
  await page.keyboard.press('Escape')
  await sheet.waitFor({ state: 'hidden' })
  expectQuiet(seen)
  await leave()
})
