/**
 * A newcomer goes from the sign-in page to a verdict: few actions, little time, nothing asked of another machine.
 * To try one file against a build that stands elsewhere: MOORAGE_SERVER=/path/server/index.mjs npx vitest run --project browser tests/browser/newcomer.test.ts
 */
import type { Browser, Locator, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, it } from 'vitest'
import type { World } from '../support/bench'
import { alive, eventually, expectQuiet, openBrowser, openContext, watch, words } from './support/browser'
import { openDemoWorld } from './support/world'

const MOST_ACTIONS = 12
const MOST_SECONDS = 60

/** Counts what a hand does: each press, each text, each address. */
class Hand {
  actions = 0
  constructor(readonly page: Page) {}
  async open(url: string) {
    this.actions += 1
    await this.page.goto(url)
    await alive(this.page)
  }

  async press(what: Locator) {
    this.actions += 1
    await what.click()
  }

  async type(what: Locator, text: string) {
    this.actions += 1
    await what.fill(text)
  }
}

let world: World, browser: Browser
beforeAll(async () => {
  [world, browser] = await Promise.all([openDemoWorld(inject('cluster')), openBrowser()])
})
afterAll(async () => {
  await browser?.close()
  await world?.end()
})

it('goes from the sign-in page to a verdict in at most 12 actions and 60 s', async () => {
  const context = await openContext(browser)
  const page = await context.newPage()
  const seen = watch(page, world.server.base)
  const hand = new Hand(page)
  const startedAt = performance.now()
  await hand.open(`${world.server.base}/sign-in`)
  await hand.press(page.getByRole('button', { name: /^Orla Venn/ }))
  await hand.press(page.getByRole('button', { name: 'Sign in', exact: true }))
  await page.waitForURL('**/bench')
  await hand.press(page.locator('table').getByRole('link', { name: /control/i }).first())
  await page.waitForURL(/\/scenarios\/[0-9a-f-]{36}$/)
  const depletion = page.getByRole('textbox', { name: /^Depletion/ })
  await depletion.waitFor()
  await hand.type(depletion, '0,8')
  await hand.press(page.getByRole('button', { name: 'Set going', exact: true }))
  await page.waitForURL(/\/runs\/[0-9a-f-]{36}$/, { timeout: MOST_SECONDS * 1000 })
  const verdict = page.locator('h1')
  await eventually(() => words(verdict), { timeout: 20_000 }).toMatch(/closed form/i)
  const seconds = (performance.now() - startedAt) / 1000

  console.log(`newcomer: ${hand.actions} actions, ${seconds.toFixed(1)} s; ${seen.requests.length} requests, all to the same origin. It read: ${await words(verdict)}`)
  expect(await words(page.locator('.kind'))).toMatch(/agrees|slower|faster|undecided/i)
  expect(hand.actions).toBeLessThanOrEqual(MOST_ACTIONS)
  expect(seconds).toBeLessThanOrEqual(MOST_SECONDS)
  expectQuiet(seen)
  const runs = await world.database.ask<{ run_id: string, replicates: number }>('select run_id, replicates from runs where run_id = $1', [new URL(page.url()).pathname.split('/').at(-1)])
  expect(runs).toHaveLength(1)
  await context.close()
})
