/** Times inside the page: from an input to the drawn curves, and tasks that hold the main thread. */
import type { Page } from 'playwright-core'

export interface Drawn { /** Closed form changed [ms]. */ formulaMs: number, /** Closed form and walk changed, and the next frame begun [ms]. */ bothMs: number }
interface Marks { drawn: Drawn[], longest: number, tasks: number }
type Marked = Window & { moorageMarks?: Marks }

/** Watches the first figure of the page: from each input event until its curves have changed and a frame is drawn. */
export async function startStopwatch(page: Page): Promise<void> {
  await page.evaluate(() => {
    const marks: Marks = (window as Marked).moorageMarks = { drawn: [], longest: 0, tasks: 0 }
    new PerformanceObserver((list) => {
      for (const task of list.getEntries()) {
        marks.tasks += 1
        marks.longest = Math.max(marks.longest, task.duration)
      }
    }).observe({ type: 'longtask' })
    const figure = document.querySelector('[data-preview]')!
    const paths = () => ['exp', 'sim'].map(name => figure.querySelector(`svg path.${name}`)?.getAttribute('d') ?? '')
    let at = 0, before = paths(), formulaMs = 0, open = false
    addEventListener('input', (event) => {
      at = event.timeStamp
      before = paths()
      formulaMs = 0
      open = true
    }, true)
    new MutationObserver(() => {
      if (!open) return
      const [formula, walk] = paths()
      if (formulaMs === 0 && formula !== before[0]) formulaMs = performance.now() - at
      if (formulaMs === 0 || !walk || walk === before[1]) return
      open = false
      const mine = at, first = formulaMs
      requestAnimationFrame(() => marks.drawn.push({ formulaMs: first, bothMs: performance.now() - mine }))
    }).observe(figure, { subtree: true, childList: true, attributes: true, attributeFilter: ['d'] })
  })
}

export const readStopwatch = (page: Page): Promise<Marks> => page.evaluate(() => (window as Marked).moorageMarks!)
export const waitForDrawn = (page: Page, count: number) => page.waitForFunction(wanted => (window as Marked).moorageMarks!.drawn.length >= wanted && document.querySelector('[data-preview]')?.getAttribute('data-preview') === 'drawn', count)

/** The value that 95 of 100 do not exceed. */
export function p95(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.ceil(0.95 * sorted.length) - 1)]!
}

/** A test fails at so many times the goal: it guards against breakage, the goals themselves are measured on a machine that has nothing else to do. */
export const SLACK = 4
