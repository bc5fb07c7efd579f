/** A stranger at the front page: a curve at once, a verdict in their own browser, nothing left on the server. */
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { eventually, expectQuiet, words } from './support/browser'
import { Pier } from './support/bench'

/** Ten seconds from the press to the curve, four times that on a busy machine. */
const MOST_WALK_SECONDS = 40
const labelled = (page: Page, label: RegExp) => page.getByRole('textbox', { name: label })
const fact = (page: Page, name: RegExp) => page.locator('dl.facts > div').filter({ hasText: name }).locator('dd').first()
const pathOf = (page: Page, curve: string) => page.locator(`figure svg path.${curve}`).first().getAttribute('d')

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
})
afterAll(() => pier?.close())

it('lets a stranger change s, run the sample and read a verdict, and stores nothing', async () => {
  const before = await pier.counts()
  const { page, seen, leave } = await pier.seat('/', { who: null })
  const quick = fact(page, /^\s*Quick sites/), drawn = await pathOf(page, 'exp')
  expect(await words(quick)).toContain('0.833 s')

  await labelled(page, /^Attachment, quick/).fill('0.15')
  await eventually(() => words(quick)).toContain('1.67 s')
  expect(await pathOf(page, 'exp')).not.toBe(drawn)

  const pressedAt = performance.now()
  await page.getByRole('button', { name: 'Set going', exact: true }).click()
  await page.locator('figure svg path.sim').waitFor()
  const seconds = (performance.now() - pressedAt) / 1000
  console.log(`front page: walk with its band ${seconds.toFixed(1)} s after the press`)
  expect(seconds).toBeLessThan(MOST_WALK_SECONDS)
  expect(await page.locator('figure svg path.sim-band').first().getAttribute('d')).toMatch(/^M/)
  expect(await words(page.locator('figcaption').first())).toMatch(/Here the walk (agrees with|is slower than|is faster than|may or may not differ from) the closed form at a margin of ±5 %: ratio [\d.]+/)
  expect(await page.locator('figure svg .dot').count()).toBeGreaterThan(5)
  expect(await words(page.locator('figcaption').first())).toContain('bars SEM')

  expect(seen.writes()).toEqual([])
  expect(await pier.counts()).toEqual(before)
  expectQuiet(seen)
  await leave()
})

it('agrees on the sample as it stands and says what held supply does', async () => {
  const { page, seen, leave } = await pier.seat('/', { who: null })
  const caption = page.locator('figcaption').first()
  await page.keyboard.press('Control+Enter')
  await eventually(() => words(caption), { timeout: 60_000 }).toContain('Here the walk agrees with the closed form')
  await page.locator('label').filter({ hasText: /^\s*held\s*$/ }).click()
  await eventually(() => words(caption)).toContain('The numbers were changed since')
  await page.getByRole('button', { name: 'Set going', exact: true }).click()
  await eventually(() => words(caption), { timeout: 60_000 }).toContain('Here the walk is slower than the closed form')
  await page.getByRole('button', { name: 'Put back' }).click()
  await eventually(() => words(caption)).toContain('The walk is drawn when you set it going')
  expectQuiet(seen)
  await leave()
})

it('shows one stored length in nm and in µm', async () => {
  const { page, seen, leave } = await pier.seat('/', { who: null })
  const diameter = labelled(page, /^Vesicle diameter/), unit = page.getByLabel('Unit of Vesicle diameter')
  const hits = fact(page, /^\s*Hits per empty site/), before = await words(hits), curve = await pathOf(page, 'exp')
  await unit.selectOption('µm')
  expect(await diameter.inputValue()).toBe('0.05')
  await unit.selectOption('nm')
  expect(await diameter.inputValue()).toBe('50')
  await unit.selectOption('µm')
  await diameter.fill('0,05')
  await diameter.press('Enter')
  expect(await diameter.inputValue()).toBe('0.05')
  expect(await words(hits)).toBe(before)
  expect(await pathOf(page, 'exp')).toBe(curve)
  expect(await page.getByRole('button', { name: 'Put back' }).count()).toBe(0)
  await diameter.fill('0,06')
  await eventually(() => words(hits)).not.toBe(before)
  expectQuiet(seen)
  await leave()
})

it('keeps what cannot be used, says why, and counts it on the button', async () => {
  const { page, seen, leave } = await pier.seat('/', { who: null })
  const quick = labelled(page, /^Attachment, quick/)
  await quick.fill('30')
  const field = page.locator('.field').filter({ has: quick })
  await eventually(() => words(field.locator('.msg'))).toMatch(/between 0 and 1\..*30 %.*0\.3/)
  expect(await quick.inputValue()).toBe('30')
  expect(await quick.getAttribute('aria-invalid')).toBe('true')
  expect(await page.getByRole('button', { name: 'Set going: fix 1 field first' }).count()).toBe(1)
  await page.getByRole('button', { name: /^Set going/ }).click({ force: true })
  expect(await page.locator('figure svg path.sim').count()).toBe(0)
  await quick.fill('0,3')
  await quick.press('Enter')
  expect(await quick.inputValue()).toBe('0.3')
  expect(await page.getByRole('button', { name: 'Set going', exact: true }).count()).toBe(1)
  expectQuiet(seen)
  await leave()
})
