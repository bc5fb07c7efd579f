/** The same run again: here, in Node with one and with two workers, after a worker was lost; and what a single replicate says. */
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Outcome } from '../../shared/schemas/outcome'
import type { Scenario } from '../../shared/schemas/scenario'
import { expectQuiet, words } from './support/browser'
import { atSavedRun, box, enter, goButton, Pier } from './support/bench'
import { runScript } from './support/world'

let pier: Pier, folder: string
beforeAll(async () => {
  [pier, folder] = await Promise.all([Pier.open(), mkdtemp(join(tmpdir(), 'moorage-same-'))])
})
afterAll(async () => {
  await pier?.close()
  await rm(folder, { recursive: true, force: true })
})

async function inNode(document: Scenario, seed: string, replicates: number, workers: number, algorithm = 'auto'): Promise<Outcome> {
  const file = join(folder, `${seed.replace(/\W/g, '')}.json`)
  await writeFile(file, JSON.stringify(document))
  return JSON.parse(await runScript('simulate.ts', [file, '--seed', seed, '--replicates', String(replicates), '--workers', String(workers), '--algorithm', algorithm, '--json'])) as Outcome
}

it('gives the same digest in Chromium, again in Chromium, and in Node with one and with two workers', async () => {
  const { scenarioId, document } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, 'replicates', '120')
  await box(page, 'seed').fill('tide 7')
  await goButton(page).click()
  const run = await pier.run(await atSavedRun(page))
  await page.getByRole('button', { name: 'Run again here' }).click()
  const verdict = page.locator('dt').filter({ hasText: 'The two outcomes' }).locator('xpath=following-sibling::dd[1]')
  await verdict.waitFor()
  expect(await words(verdict)).toBe('identical')
  expect(await pier.savedRuns(scenarioId)).toHaveLength(1)
  expect(run.outcome.engine.algorithm).toBe('attempt')
  const [one, two] = [await inNode(document, 'tide 7', 120, 1), await inNode(document, 'tide 7', 120, 2)]
  expect([one.digest, two.digest]).toEqual([run.outcome.digest, run.outcome.digest])
  expect(one.ratio).toEqual(run.outcome.ratio)
  expectQuiet(seen)
  await leave()
})

it('replaces a worker that died and gives the same digest', async () => {
  const { scenarioId, document } = await pier.scenario({ reservoir: { supply: 'stirred' } })
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`, {
    script: () => {
      const Real = Worker, mine = window as unknown as { moorageKill?: boolean, moorageKilled?: number }
      /** Once told to, the next walk worker that is given work dies over it. */
      window.Worker = class extends Real {
        readonly walks: boolean
        constructor(address: string | URL, options?: WorkerOptions) {
          super(address, options)
          this.walks = options?.name === 'walk'
        }

        override postMessage(message: unknown, ...rest: unknown[]): void {
          Reflect.apply(Real.prototype.postMessage, this, [message, ...rest])
          if (!mine.moorageKill || !this.walks) return
          mine.moorageKill = false
          mine.moorageKilled = (mine.moorageKilled ?? 0) + 1
          this.terminate()
          this.dispatchEvent(new ErrorEvent('error', { message: 'The test ended this worker.' }))
        }
      }
    },
  })
  await page.locator('[data-preview="drawn"]').waitFor()
  await enter(page, 'replicates', '150')
  await box(page, 'seed').fill('storm 3')
  await page.evaluate(() => { (window as unknown as { moorageKill: boolean }).moorageKill = true })
  await goButton(page).click()
  const run = await pier.run(await atSavedRun(page))
  expect(await page.evaluate(() => (window as unknown as { moorageKilled?: number }).moorageKilled)).toBe(1)
  expect(run).toMatchObject({ partial: false, replicates: 150 })
  expect((await inNode(document, 'storm 3', 150, 1)).digest).toBe(run.outcome.digest)
  expectQuiet(seen)
  await leave()
})

it('runs a single replicate without a band and says why', async () => {
  const { scenarioId } = await pier.scenario()
  const { page, seen, leave } = await pier.seat(`/scenarios/${scenarioId}`)
  await enter(page, 'replicates', '1')
  await goButton(page).click()
  const run = await pier.run(await atSavedRun(page))
  expect(run.outcome.ratio).toMatchObject({ low: null, high: null })
  expect(await words(page.locator('figcaption').first())).toContain('One replicate: no band is drawn, because a spread needs at least two.')
  expect(await page.locator('figure svg path.sim').first().getAttribute('d')).toMatch(/^M/)
  expect(await page.locator('figure').first().locator('svg path.sim-band, svg path.sim-spread').count()).toBe(0)
  expect(await words(page.locator('h1'))).toMatch(/from one replicate: it has no interval and decides nothing/)
  expectQuiet(seen)
  await leave()
})
