/** A bench of the test's own with the demo's control scenario, its people, and pages that are signed in as them. */
import type { Browser, BrowserContext, BrowserContextOptions, Page } from 'playwright-core'
import { inject } from 'vitest'
import type { Role } from '../../../shared/permissions'
import type { RunDetail } from '../../../shared/schemas/api/run'
import type { ScenarioDetail } from '../../../shared/schemas/api/scenario'
import { DEMO_SCENARIOS } from '../../../shared/almanac/demo-scenarios'
import type { ScenarioInput } from '../../../shared/schemas/scenario'
import { makeBench, makeScenario, openWorld, type World } from '../../support/bench'
import { arrive, type Visitor } from '../../support/visitor'
import { alive, openBrowser, openContext, visit, watch, type Watch } from './browser'

export const CONTROL: ScenarioInput = DEMO_SCENARIOS[0]!.scenario
export interface Seat { context: BrowserContext, page: Page, seen: Watch, leave: () => Promise<void> }

export class Pier {
  private constructor(readonly world: World, readonly browser: Browser, readonly lead: Visitor, readonly benchId: string) {}

  static async open(settings: Record<string, string> = {}): Promise<Pier> {
    const [world, browser] = await Promise.all([openWorld(inject('cluster'), settings), openBrowser()])
    const lead = await arrive(world.database.db, world.server.base, 'Lead Person')
    return new Pier(world, browser, lead, await makeBench(world, lead))
  }

  async close() {
    await this.browser.close()
    await this.world.end()
  }

  get base() {
    return this.world.server.base
  }

  person(name: string, role: Role): Promise<Visitor> {
    return arrive(this.world.database.db, this.base, name, { benchId: this.benchId, role })
  }

  scenario(change: Partial<ScenarioInput> = {}, who = this.lead): Promise<ScenarioDetail> {
    return makeScenario(who, this.benchId, { ...CONTROL, ...change })
  }

  /** A fresh profile of a person, its first page open. `expected`: complaints that the test provokes. */
  async seat(path: string, options: { who?: Visitor | null, context?: BrowserContextOptions, expected?: RegExp[], script?: () => void } = {}): Promise<Seat> {
    const who = options.who === undefined ? this.lead : options.who ?? undefined
    const context = await openContext(this.browser, options.context, who)
    if (options.script) await context.addInitScript(options.script)
    const page = await context.newPage()
    const seen = watch(page, this.base, options.expected)
    await visit(page, this.base + path)
    return { context, page, seen, leave: () => context.close() }
  }

  async reload(page: Page) {
    await page.reload()
    await alive(page)
  }

  /** Rows of every table: what a page left on the server. */
  async counts(): Promise<Record<string, number>> {
    const tables = await this.world.database.ask<{ name: string }>('select table_name as name from information_schema.tables where table_schema = \'public\' and table_type = \'BASE TABLE\' order by 1')
    const found = await Promise.all(tables.map(async ({ name }) => [name, Number((await this.world.database.ask<{ count: string }>(`select count(*) from "${name}"`))[0]!.count)] as const))
    return Object.fromEntries(found)
  }

  async savedRuns(scenarioId: string): Promise<{ runId: string, digest: string, partial: boolean, replicates: number }[]> {
    return this.world.database.ask('select run_id as "runId", digest, partial, replicates from runs where scenario_id = $1 order by number', [scenarioId])
  }

  async run(runId: string): Promise<RunDetail> {
    return (await this.lead.get<RunDetail>(`/api/runs/${runId}`)).body
  }
}

/** The box of one field of the scenario. */
export const box = (page: Page, path: string) => page.locator(`[data-path="${path}"] input, [data-path="${path}"] textarea`).first()
/** The line below it: problem, caution or hint. */
export const note = (page: Page, path: string) => page.locator(`[data-path="${path}"] .msg`)
export const goButton = (page: Page) => page.getByRole('button', { name: /^Set going/ })
/** Typed and left, as by hand. */
export async function enter(page: Page, path: string, text: string) {
  await box(page, path).fill(text)
  await box(page, path).press('Enter')
}
/** A finished run's own page on the bench. */
export async function atSavedRun(page: Page): Promise<string> {
  await page.waitForURL(/\/runs\/[0-9a-f]{8}-[0-9a-f-]{27}$/)
  return new URL(page.url()).pathname.split('/').at(-1)!
}
