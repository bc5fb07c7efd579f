/** Sentences and small readings of the frame: times, refusals, the bench's home, imported files, keys, contours. */
import { describe, expect, it } from 'vitest'
import { nameOfKey } from '../../../app/composables/useKeys'
import { readScenarioText } from '../../../app/composables/useScenarioImport'
import { changeWords, homeSentence, peopleByRole, plusMinus, type HomeScenario } from '../../../app/utils/benchWords'
import { contourPaths } from '../../../app/utils/contours'
import { refusalOf, sentenceOf } from '../../../app/utils/refusal'
import { turnAway } from '../../../app/utils/turnAway'
import { whenOf } from '../../../app/utils/when'
import { DEMO_SCENARIOS } from '../../../shared/almanac/demo-scenarios'
import type { BenchHome } from '../../../shared/schemas/api/bench'

describe('times', () => {
  const now = new Date(2026, 10, 30, 9, 0)
  const at = (...parts: [number, number, number, number, number]) => new Date(...parts).toISOString()
  it.each([
    [at(2026, 10, 30, 8, 31), 'today, 08:31'], [at(2026, 10, 29, 23, 59), 'yesterday, 23:59'],
    [at(2026, 10, 2, 7, 5), '2 Nov, 07:05'], [at(2025, 11, 31, 0, 0), '31 Dec 2025, 00:00'],
  ])('says %s', (iso, said) => expect(whenOf(iso, now)).toBe(said))
  it('shows what is no time as it came', () => expect(whenOf('soon', now)).toBe('soon'))
})

describe('refusals', () => {
  it('keeps code, fields and revision of a problem document', () => {
    const body = { code: 'moved_on', status: 412, detail: 'x', errors: [{ path: 'medium', message: 'm' }], current: { revision: 4 } }
    expect(refusalOf({ status: 412, data: body })).toMatchObject({ code: 'moved_on', status: 412, errors: body.errors, current: { revision: 4 } })
    expect(refusalOf({ statusCode: 412, data: JSON.stringify(body) }).code).toBe('moved_on')
  })
  it('calls a missing answer no connection, and an answer without a document by its status', () => {
    expect(refusalOf(new TypeError('Failed to fetch')).code).toBe('no_connection')
    expect(refusalOf({ status: 503, data: '<html>' }).code).toBe('database_away')
    expect(refusalOf({ status: 502 }).code).toBe('fault')
  })
  it('lets the bench say its own rule, and names the wait', () => {
    expect(sentenceOf({ code: 'rule_of_the_bench', status: 409, detail: 'The last lead stays.', errors: [] })).toBe('The last lead stays.')
    expect(sentenceOf({ code: 'too_many', status: 429, detail: '', errors: [], retryAfterSeconds: 30 })).toMatch(/Try again in 30 s\.$/)
  })
})

describe('the bench’s home', () => {
  const scenario = (number: number, verdict: 'agrees' | 'slower' | 'undecided'): HomeScenario => ({
    scenarioId: `s${number}`, title: `Control ${number}`, revision: 1, updatedAt: '2026-11-30T08:00:00Z',
    lastRun: { runId: 'r', number, savedAt: '2026-11-30T08:00:00Z', ratio: { value: 1.129, low: 1.105, high: 1.153 }, verdict, classes: [], curve: [] },
  })
  const home = (scenarios: HomeScenario[], scenarioCount = scenarios.length) => ({ scenarios, scenarioCount }) as BenchHome
  const said = (parts: { text: string }[]) => parts.map(part => part.text).join('')
  it('reports the newest run with its interval', () => {
    expect(said(homeSentence(home([scenario(11, 'agrees'), scenario(14, 'slower')])))).toBe('Run 14 of Control 14: refill takes 1.13 times as long as the closed form says (1.10 to 1.15).')
  })
  it('never calls an undecided run slower', () => expect(said(homeSentence(home([scenario(3, 'undecided')])))).toMatch(/undecided whether the closed form holds\.$/))
  it('says when nothing has run', () => expect(said(homeSentence(home([{ ...scenario(1, 'agrees'), lastRun: null }])))).toBe('One scenario stands on this bench; none has been run yet.'))
  it('writes an uneven interval as its ends', () => {
    expect(plusMinus({ value: 1, low: 0.97, high: 1.03 })).toEqual({ value: '1.00', error: '± 0.03' })
    expect(plusMinus({ value: 1, low: 0.95, high: 1.2 }).error).toMatch(/^\(.+ to .+\)$/)
    expect(plusMinus({ value: null, low: null, high: null })).toEqual({ value: '–', error: '' })
  })
  it('leads a change to what changed', () => {
    const change = { kind: 'run-saved', who: 'Tomasz Birk', at: '', scenarioId: 's', title: 'Control', revision: null, runId: 'r9', runNumber: 9, recordingId: null, weighUpId: null, binned: null } as const
    expect(changeWords(change)).toEqual({ does: 'saved', link: 'Run 9', to: '/runs/r9', rest: ' of Control' })
  })
  it('groups people by role', () => {
    expect(peopleByRole([{ name: 'A', role: 'member' }, { name: 'B', role: 'lead' }, { name: 'C', role: 'member' }])).toEqual([{ names: 'B', role: 'lead' }, { names: 'A, C', role: 'members' }])
  })
})

describe('an imported scenario', () => {
  const { scenario } = DEMO_SCENARIOS[0]!
  it('comes back as it was written', () => expect(readScenarioText('a.json', JSON.stringify(scenario)).scenario).toEqual(scenario))
  it('names every wrong path, and each unknown key', () => {
    const wrong = { ...scenario, extra: 1, medium: { ...scenario.medium, diffusionUm2PerS: -1, spacing: 4 } }
    const { scenario: read, problems } = readScenarioText('a.json', JSON.stringify(wrong))
    expect(read).toBeUndefined()
    expect(problems.map(one => one.path).sort()).toEqual(['extra', 'medium.diffusionUm2PerS', 'medium.spacing'])
  })
  it.each(['', 'title: x', '{"a":', '[1]', 'null', '"moorage-scenario"', '{"format":"moorage-outcome"}'])('refuses %s with a sentence', (text) => {
    const { scenario: read, problems } = readScenarioText('a.json', text)
    expect(read).toBeUndefined()
    expect(problems[0]!.message.length).toBeGreaterThan(10)
  })
})

describe('keys, the way to the sign-in and contours', () => {
  const press = (key: string, held: Partial<KeyboardEvent> = {}) => nameOfKey({ key, ctrlKey: false, metaKey: false, altKey: false, ...held })
  it('names a key with what is held', () => {
    expect(press('?')).toBe('?')
    expect(press('Enter', { ctrlKey: true })).toBe('Ctrl+Enter')
    expect(press('Enter', { metaKey: true })).toBe('Ctrl+Enter')
    expect(press('s', { altKey: true })).toBe('Alt+S')
  })
  it('turns a stranger away only when it is known that nobody is signed in', () => {
    const to = { fullPath: '/runs?bin=1' }
    expect(turnAway(to, { known: true, me: null })).toEqual({ path: '/sign-in', query: { to: '/runs?bin=1' } })
    expect(turnAway(to, { known: false, me: null })).toBeUndefined()
    expect(turnAway(to, { known: true, me: {} })).toBeUndefined()
  })
  it('draws six closed curves inside the field, the same for the same seed', () => {
    for (const seed of ['sign in', 'register', 'members', '0192f3aa']) {
      const paths = contourPaths(seed)
      expect(paths).toHaveLength(6)
      expect(paths).toEqual(contourPaths(seed))
      const numbers = paths.join(' ').match(/-?\d+(\.\d+)?/g)!.map(Number)
      const [x, y] = [0, 1].map(odd => numbers.filter((_, i) => i % 2 === odd))
      expect(Math.min(...x!)).toBeGreaterThanOrEqual(0)
      expect(Math.max(...x!)).toBeLessThanOrEqual(640)
      expect(Math.min(...y!)).toBeGreaterThanOrEqual(0)
      expect(Math.max(...y!)).toBeLessThanOrEqual(520)
    }
    expect(contourPaths('a')).not.toEqual(contourPaths('b'))
  })
})
