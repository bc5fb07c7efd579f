/** The picture of the terminal: three dimensions where there is WebGL, flat where there is none, still where less motion is asked for. */
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import type { RunDetail } from '../../shared/schemas/api/run'
import { SMALL } from '../support/bench'
import { runBody } from '../support/runs'
import { eventually, expectQuiet, words } from './support/browser'
import { Pier } from './support/bench'

let pier: Pier, address: string
beforeAll(async () => {
  pier = await Pier.open()
  const document = { ...SMALL, reservoir: { supply: 'held' as const, marginSites: 6 } }
  const { scenarioId } = await pier.scenario(document)
  const saved = await pier.lead.post<RunDetail>(`/api/scenarios/${scenarioId}/runs`, await runBody({ ...document }, { replicates: 50 }), { 'idempotency-key': 'a-key-for-the-terminal' })
  if (saved.status !== 201) throw new Error(`The run was not saved: ${saved.status} ${JSON.stringify(saved.body)}`)
  address = `/runs/${saved.body.runId}`
})
afterAll(() => pier?.close())

const terminal = (page: Page) => page.locator('section').filter({ has: page.getByRole('heading', { name: /^Terminal/ }) })
const time = (page: Page) => words(terminal(page).getByRole('heading'))
const frames = (page: Page, count: number) => page.evaluate(async (wanted) => {
  for (let i = 0; i < wanted; i++) await new Promise(requestAnimationFrame)
}, count)

it('turns the ribbon in three dimensions and plays until it is stopped', async () => {
  const { page, seen, leave } = await pier.seat(address, { expected: [/GPU stall|GroupMarkerNotSet/] })
  await terminal(page).locator('svg').first().waitFor()
  await terminal(page).getByRole('button', { name: 'Turn in 3D' }).click()
  const canvas = terminal(page).locator('canvas')
  await canvas.waitFor()
  /** What is drawn differs from an even ground: at least a few hundred bytes more than an empty picture packs to. */
  const picture = () => terminal(page).locator('.scene').screenshot()
  const scene = terminal(page).getByRole('application')
  expect(await scene.getAttribute('aria-label')).toMatch(/^The ribbon in three dimensions with [1-9]\d* free vesicles/)
  await frames(page, 3)
  const before = await picture()
  await scene.focus()
  for (let i = 0; i < 4; i++) await page.keyboard.press('ArrowLeft')
  await frames(page, 3)
  expect((await picture()).equals(before)).toBe(false)

  const start = await time(page)
  await terminal(page).getByRole('button', { name: 'Play the walk' }).click()
  await eventually(() => time(page)).not.toBe(start)
  await terminal(page).getByRole('button', { name: 'Stop the walk' }).click()
  await terminal(page).getByRole('button', { name: 'Play the walk' }).waitFor()
  await terminal(page).getByRole('button', { name: 'Flat again' }).click()
  await terminal(page).locator('svg').first().waitFor()
  expectQuiet(seen)
  await leave()
})

it('shows the flat picture and says so where WebGL is missing', async () => {
  const { page, seen, leave } = await pier.seat(address, {
    script: () => {
      const real = HTMLCanvasElement.prototype.getContext as (this: HTMLCanvasElement, kind: string, ...rest: unknown[]) => unknown
      HTMLCanvasElement.prototype.getContext = function (this: HTMLCanvasElement, kind: string, ...rest: unknown[]) {
        return kind.startsWith('webgl') ? null : real.call(this, kind, ...rest)
      } as typeof HTMLCanvasElement.prototype.getContext
    },
  })
  await terminal(page).locator('svg').first().waitFor()
  await terminal(page).getByRole('button', { name: 'Turn in 3D' }).click()
  await eventually(() => words(terminal(page))).toContain('This browser shows no 3D (WebGL 2 is missing); the flat picture stands.')
  expect(await terminal(page).locator('svg').count()).toBeGreaterThan(0)
  expect(await terminal(page).locator('canvas').count()).toBe(0)
  expectQuiet(seen)
  await leave()
})

it('stays still where the device asks for less motion, and moves by single steps on request', async () => {
  const { page, seen, leave } = await pier.seat(address, { context: { reducedMotion: 'reduce' }, expected: [/GPU stall|GroupMarkerNotSet/] })
  await terminal(page).locator('svg').first().waitFor()
  expect(await words(terminal(page))).toContain('It moves by single steps only, as this device asks for less motion.')
  expect(await terminal(page).getByRole('button', { name: 'Play the walk' }).count()).toBe(0)
  await terminal(page).getByRole('button', { name: 'Turn in 3D' }).click()
  await terminal(page).locator('canvas').waitFor()
  await frames(page, 5)
  const [before, shown] = [await time(page), await terminal(page).locator('.scene').screenshot()]
  await frames(page, 30)
  expect(await time(page)).toBe(before)
  expect((await terminal(page).locator('.scene').screenshot()).equals(shown)).toBe(true)
  await terminal(page).getByRole('button', { name: '25', exact: true }).click()
  await terminal(page).getByRole('button', { name: '25 steps' }).click()
  await eventually(() => time(page)).not.toBe(before)
  const running = await page.evaluate(() => document.getAnimations().filter(one => one.playState === 'running').length)
  expect(running).toBe(0)
  expectQuiet(seen)
  await leave()
})
