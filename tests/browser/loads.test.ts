/** What a first visit loads: little on the sign-in page and the lists, charts and 3D only where they are drawn, everything compressed. */
import { readdirSync, readFileSync } from 'node:fs'
import { request } from 'node:http'
import { dirname, join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { SERVER_SCRIPT } from '../support/server'
import { expectQuiet } from './support/browser'
import { Pier } from './support/bench'

/** JavaScript of a first visit, gzipped [bytes]. */
const MOST_BYTES = 170 * 1000
/** Below this a packed file is no smaller, so the build keeps none [bytes]. */
const LARGE = 2048
const FOLDER = join(dirname(SERVER_SCRIPT), '../public/_nuxt')
/** Words that only the code of these packages has. */
const HEAVY = { 'three': /WebGLRenderer/, 'chart.js': /is not a registered / }

let pier: Pier
beforeAll(async () => {
  pier = await Pier.open()
  await pier.scenario()
})
afterAll(() => pier?.close())

const received = (url: string, accept: string) => new Promise<{ bytes: number, encoding: string, cache: string }>((resolve, reject) => {
  request(url, { headers: { 'accept-encoding': accept } }, (answer) => {
    let bytes = 0
    answer.on('data', (chunk: Buffer) => bytes += chunk.length)
    answer.on('end', () => resolve({ bytes, encoding: String(answer.headers['content-encoding'] ?? ''), cache: String(answer.headers['cache-control'] ?? '') }))
  }).on('error', reject).end()
})

describe('first load', () => {
  it('tells heavy code by words that the build really has', () => {
    const texts = readdirSync(FOLDER).filter(name => name.endsWith('.js')).map(name => readFileSync(join(FOLDER, name), 'utf8'))
    for (const [name, words] of Object.entries(HEAVY)) expect(texts.filter(text => words.test(text)).length, name).toBeGreaterThan(0)
  })

  it.each([['/sign-in', false], ['/bench', true], ['/scenarios', true], ['/runs', true]] as const)('of %s has at most 170 kB of script, no chart and no 3D', async (path, signedIn) => {
    const { page, seen, leave } = await pier.seat(path, { who: signedIn ? undefined : null })
    await page.waitForLoadState('networkidle')
    const scripts = [...new Set(seen.requests.map(one => one.url).filter(url => new URL(url).pathname.endsWith('.js')))]
    const sizes = await Promise.all(scripts.map(url => received(url, 'gzip')))
    const total = sizes.reduce((sum, one) => sum + one.bytes, 0)
    console.log(`${path}: ${(total / 1000).toFixed(1)} kB of script gzipped in ${scripts.length} files`)
    expect(scripts.length).toBeGreaterThan(0)
    expect(sizes.filter(one => one.bytes > LARGE && one.encoding !== 'gzip')).toEqual([])
    expect(total).toBeLessThan(MOST_BYTES)
    for (const [name, words] of Object.entries(HEAVY))
      expect(scripts.filter(url => words.test(readFileSync(join(FOLDER, new URL(url).pathname.split('/').at(-1)!), 'utf8'))), name).toEqual([])
    expectQuiet(seen)
    await leave()
  })
})

it('sends what it builds compressed and to be kept', async () => {
  const large = readdirSync(FOLDER).filter(name => /\.(js|css|wasm)$/.test(name) && readFileSync(join(FOLDER, name)).length > LARGE)
  expect(large.some(name => name.endsWith('.css'))).toBe(true)
  expect(large.some(name => name.endsWith('.wasm'))).toBe(true)
  for (const name of large) {
    const [brotli, gzip] = await Promise.all(['br', 'gzip'].map(kind => received(`${pier.base}/_nuxt/${name}`, kind)))
    expect([name, brotli!.encoding, gzip!.encoding]).toEqual([name, 'br', 'gzip'])
    expect(gzip!.bytes).toBeLessThan(readFileSync(join(FOLDER, name)).length)
    expect(brotli!.cache).toMatch(/immutable|max-age=[1-9]/)
  }
})
