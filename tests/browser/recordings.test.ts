/** A messy file becomes a recording, a fit and a weigh-up; what was kept gives the same digest here. */
import { createHash } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { WeighUpDetail } from '../../shared/schemas/api/weigh-up'
import { demoFile, keep } from '../support/recordings'
import { eventually, expectQuiet, words } from './support/browser'
import { Pier } from './support/bench'

const MESSY = fileURLToPath(new URL('../../scripts/demo-data/control_messy.csv', import.meta.url))

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
})
afterAll(() => pier?.close())

it('reads the messy file as it stands, keeps it, fits it, and gives the file back byte for byte', async () => {
  const { page, seen, leave } = await pier.seat('/recordings/import')
  await page.setInputFiles('input[type=file]', MESSY)
  const heading = page.locator('h1').first()
  await eventually(() => words(heading)).toBe('11 points read; 7 of 19 lines set aside, each with its reason.')
  const lines = page.locator('table.import tbody tr')
  expect(await lines.count()).toBe(19)
  const cells = async (line: number) => (await lines.nth(line).locator('td').allTextContents()).map(text => text.trim()).slice(0, 9)
  expect(await cells(5)).toEqual(['6', '0,05', '15,0', '0,8', '9', '50', '0.150', '0.008', '9'])
  expect(await words(lines.nth(0))).toContain('set aside: title')
  expect(await page.getByLabel('Encoding').inputValue()).toBeTruthy()

  // Every guess can be changed, and the preview follows.
  await page.getByLabel('Ratio', { exact: true }).selectOption({ label: 'ratio' })
  await eventually(async () => (await cells(5))[6]).toBe('15.000')
  await page.getByLabel('Ratio', { exact: true }).selectOption({ label: 'percent' })
  await eventually(async () => (await cells(5))[6]).toBe('0.150')

  await page.getByRole('button', { name: /^Keep as “Control messy, 9 cells”$/ }).click()
  await page.waitForURL(url => /^\/recordings\/[0-9a-f-]{36}$/.test(url.pathname))
  await eventually(() => words(heading)).toMatch(/^Two exponentials are needed: 6\d % recover with \d+ ms, the rest with 2\d(\.\d)? s\.$/)
  const download = page.waitForEvent('download')
  await page.getByRole('link', { name: 'Download the original file' }).click()
  const file = await readFile(await (await download).path())
  expect(createHash('sha256').update(file).digest('hex')).toBe(createHash('sha256').update(await readFile(MESSY)).digest('hex'))

  await page.getByRole('button', { name: /^set aside at 50 ms$/ }).click()
  await page.getByLabel('Reason').fill('artefact')
  await page.getByRole('dialog').getByRole('button', { name: 'Set aside' }).click()
  await eventually(() => words(page.locator('tr.aside').first())).toContain('set aside: artefact')
  await pier.scenario({ title: 'A base to match' })
  await page.reload()
  await page.getByLabel('Medium and ribbon of').selectOption({ label: 'A base to match' })
  const kinds = page.locator('section').filter({ has: page.getByRole('heading', { name: 'A scenario that matches it' }) }).locator('li')
  await eventually(() => kinds.count()).toBe(2)
  // 1/(0.1 · 800 · 0.05 · τ) with the τ of the fast phase, about 0.87 s: near 0.29.
  expect(await words(kinds.first())).toMatch(/^quick: τ \d+ ms means s 0\.2\d+ \(0\.[12]\d* to 0\.[45]\d*\)/)
  await page.getByRole('button', { name: 'Keep this fit' }).click()
  await page.getByText(/Kept .* digest [0-9a-f]{8}/).waitFor()
  expectQuiet(seen)
  await leave()
})

it('says at once why a file cannot be read, and asks where a number can be read in two ways', async () => {
  const { page, seen, leave } = await pier.seat('/recordings/import')
  const bring = (name: string, text: string | Buffer) => page.setInputFiles('input[type=file]', { name, mimeType: 'text/csv', buffer: Buffer.from(text) })
  const heading = page.locator('h1').first()
  await bring('sheet.csv', Buffer.from([0x50, 0x4B, 3, 4, 20, 0, 0, 0]))
  await eventually(() => words(heading)).toMatch(/^Not read\. .*CSV/)
  await page.getByRole('button', { name: 'Choose another file' }).click()
  await bring('two-ways.csv', 'interval_ms;ratio\n1,234;0.5\n2,345;0.6\n')
  await page.getByRole('heading', { name: 'Please answer' }).waitFor()
  expect(await words(page.locator('.head .btn'))).toMatch(/^Answer \d questions? first$/)
  await page.getByRole('button', { name: 'Choose another file' }).click()
  await page.getByLabel('Or paste cells from a spreadsheet').fill('interval_ms\tratio\n50\t0.15\n100\t0.18\n')
  await page.getByRole('button', { name: 'Read what was pasted' }).click()
  await eventually(() => words(heading)).toMatch(/^2 points read/)
  expectQuiet(seen)
  await leave()
})

/** An invented trace: two steps of 40 and 27.6 fF that fall back with 9 s, an artefact of 180 fF after each, no noise. */
function traceText(): string {
  const rows = ['time_s,Cm_fF,Vcmd_mV']
  for (let i = 0; i < 8000; i++) {
    const time = i / 1000
    let value = 5200 + 0.8 * time, inside = false
    for (const [startS, endS, stepFf] of [[1, 1.2, 40], [4.4, 4.6, 27.6]] as const) {
      if (time >= startS && time < endS) inside = true
      if (time >= endS) value += stepFf * Math.exp(-(time - endS) / 9) + (time < endS + 0.05 ? 180 * Math.exp(-(time - endS) / 0.01) : 0)
    }
    rows.push(`${time.toFixed(3)},${inside ? 'NaN' : value.toFixed(3)},${inside ? 0 : -60}`)
  }
  return rows.join('\n')
}

it('measures the steps of a raw trace, says what a missing skip would do, and refuses windows that overlap', async () => {
  const { page, seen, leave } = await pier.seat('/recordings/import')
  await page.setInputFiles('input[type=file]', { name: 'trace.csv', mimeType: 'text/csv', buffer: Buffer.from(traceText()) })
  await page.getByRole('heading', { name: 'The trace' }).waitFor()
  const rows = page.locator('table tbody tr')
  await rows.first().waitFor()
  const row = async (skip: string) => words(rows.filter({ has: page.getByRole('rowheader', { name: skip, exact: true }) }).first())
  // Without a skip the artefact lifts the first mean by 180/(100·(1 − e^−0.1)) = 18.9 fF; after 100 ms it is gone.
  expect(await row('0')).toMatch(/not58\.\d/)
  expect(await row('100')).toMatch(/not39\.\d/)
  await page.getByLabel('Second stimulus from').fill('1.35')
  await page.getByLabel('Second stimulus from').blur()
  await page.getByText(/overlap from/).first().waitFor()
  expect(await words(page.locator('.head .btn'))).toBe('Nothing can be kept yet')
  await page.getByLabel('Second stimulus from').fill('4.4')
  await page.getByLabel('Second stimulus from').blur()
  await eventually(() => words(page.locator('.head .btn'))).toMatch(/^Keep as/)
  await page.locator('.head .btn').click()
  await page.waitForURL(url => /^\/recordings\/[0-9a-f-]{36}$/.test(url.pathname))
  expectQuiet(seen)
  await leave()
})

it('weighs four conditions, keeps what was found, and gives the same digest again', async () => {
  const made: [string, string, string][] = [['control', '200 ms step', 'none'], ['short', '25 ms step', 'none'], ['AK-7', '200 ms step', 'AK-7'], ['TP-4 peptide', '200 ms step', 'TP-4 peptide']]
  for (const [from, protocol, manipulation] of made) await keep(pier.lead, pier.benchId, demoFile('cells.csv'), { from, names: { title: `Weigh ${from}`, condition: from, protocol, manipulation } })
  const { page, seen, leave } = await pier.seat('/recordings?search=weigh')
  for (const [name] of made) await page.getByRole('checkbox', { name: `Weigh Weigh ${name}`, exact: true }).check()
  const startedAt = performance.now()
  await page.getByRole('link', { name: 'Weigh explanations on these 4' }).click()
  const heading = page.locator('h1').first()
  await eventually(() => words(heading)).toMatch(/^Two kinds of site explain all four conditions together best\./)
  console.log(`four conditions weighed and shown ${(performance.now() - startedAt).toFixed(0)} ms after the press`)
  expect(await page.locator('figure svg').first().getAttribute('aria-label')).toMatch(/χ²/)
  await page.getByRole('button', { name: 'Keep this weigh-up' }).click()
  await page.waitForURL(url => /^\/weigh-ups\/[0-9a-f-]{36}$/.test(url.pathname))
  const kept = (await pier.lead.get<WeighUpDetail>(`/api/weigh-ups/${new URL(page.url()).pathname.split('/').at(-1)}`)).body
  await page.getByRole('button', { name: 'Weigh again here' }).click()
  await page.getByText(`Identical: the same digest, ${kept.digest.slice(0, 8)}.`).waitFor()
  expectQuiet(seen)
  await leave()
})
