/** A real Chromium, and what a page may never do: write an error, throw, ask another origin, break its own content rules. */
import { chromium, type Browser, type BrowserContext, type BrowserContextOptions, type Locator, type Page } from 'playwright-core'
import { expect } from 'vitest'
import { findChromium } from '../../../scripts/support/packages.mjs'
import type { Visitor } from '../../support/visitor'

/** Software rendering where there is no graphics card; no traffic of the browser's own. */
const ARGUMENTS = ['--no-sandbox', '--use-angle=swiftshader', '--enable-unsafe-swiftshader', '--disable-background-networking', '--disable-component-update', '--disable-sync', '--no-first-run', '--disable-gpu-compositing']
/** Longest wait for anything on a page [ms]: a busy machine is slow, a broken page never comes. */
export const PATIENCE_MS = 45_000
export const DESKTOP = { width: 1440, height: 900 }

export async function openBrowser(more: string[] = []): Promise<Browser> {
  const executablePath = findChromium()
  if (!executablePath) throw new Error('Chromium is missing: npm test installs it, or name one in MOORAGE_CHROMIUM.')
  return chromium.launch({ executablePath, args: [...ARGUMENTS, ...more] })
}

/** A fresh profile, signed in as the visitor where one is given. */
export async function openContext(browser: Browser, options: BrowserContextOptions = {}, visitor?: Visitor): Promise<BrowserContext> {
  const context = await browser.newContext({ viewport: DESKTOP, locale: 'en-GB', ...options })
  context.setDefaultTimeout(PATIENCE_MS)
  if (visitor) {
    const at = visitor.cookie.indexOf('=')
    await context.addCookies([{ name: visitor.cookie.slice(0, at), value: visitor.cookie.slice(at + 1), url: visitor.base, httpOnly: true, sameSite: 'Lax' }])
  }
  return context
}

export interface Watch {
  requests: { method: string, url: string }[]
  /** Errors on the console, thrown errors, requests to other origins, refusals by the content rules. */
  complaints: string[]
  /** Statements that change something, in order. */
  writes: () => string[]
}

/** Writes down everything that a page does which it should not. `expected` are answers that the test itself provokes. */
export function watch(page: Page, base: string, expected: RegExp[] = []): Watch {
  const seen: Watch = { requests: [], complaints: [], writes: () => seen.requests.filter(one => one.method !== 'GET').map(one => `${one.method} ${new URL(one.url).pathname}`) }
  const complain = (text: string) => {
    if (!expected.some(one => one.test(text))) seen.complaints.push(text)
  }
  page.on('console', (message) => {
    if (message.type() === 'error') complain(`console: ${message.text()} (${message.location().url})`)
  })
  page.on('pageerror', error => complain(`thrown: ${error.stack ?? error.message}`))
  page.context().on('request', (request) => {
    const url = request.url()
    seen.requests.push({ method: request.method(), url })
    if (!/^(data|blob):/.test(url) && new URL(url).origin !== base) complain(`another origin: ${url}`)
  })
  return seen
}

/** Looks again until it is so. */
export const eventually = <T>(read: () => T, options: { timeout?: number } = {}) => expect.poll(read, { timeout: PATIENCE_MS, interval: 100, ...options })
/** What a person reads there: one space wherever the markup or the typesetting has another kind. */
export const words = async (what: Locator): Promise<string> => (await what.textContent() ?? '').replace(/\s+/g, ' ').trim()
/** Opens an address and waits until the page is alive. */
export async function visit(page: Page, url: string): Promise<void> {
  await page.goto(url, { waitUntil: 'domcontentloaded' })
  await alive(page)
}
/** The page answers: what the server drew has been taken over by the application. */
export const alive = (page: Page) => page.waitForFunction(() => {
  try {
    return (window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp?.().isHydrating === false
  } catch {
    return false // asked in the moment when it is being made
  }
})

export const expectQuiet = (seen: Watch) => expect(seen.complaints).toEqual([])
