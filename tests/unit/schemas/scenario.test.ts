/** The scenario schema refuses what it should, by full path, and fills in what may be missing. */
import { describe, expect, it } from 'vitest'
import { fieldProblems } from '../../../shared/schemas/problem'
import { occupancyOf, ScenarioSchema, stepSeconds } from '../../../shared/schemas/scenario'
import { withValue } from '../../../app/utils/paths'
import { CONTROL } from '../../fixtures/control'

const problemsOf = (document: unknown) => {
  const parsed = ScenarioSchema.safeParse(document)
  return parsed.success ? [] : fieldProblems(parsed.error.issues)
}
const pathsOf = (document: unknown) => problemsOf(document).map(one => one.path)

it('fills in every optional key', () => {
  const scenario = ScenarioSchema.parse(CONTROL)
  expect(scenario.sites[0]).toMatchObject({ detachPerS: 0, readyPerS: null })
  expect(scenario.vesicles[0]).toMatchObject({ attachFactor: 1, mobilityFactor: 1 })
  expect(scenario.schedule).toMatchObject({ releases: [], decline: null })
})
it('derives the step a²/(6D) and the occupancy ρa³', () => {
  expect(stepSeconds(CONTROL.medium)).toBeCloseTo(0.0041666667, 9)
  expect(occupancyOf(CONTROL.medium)).toBeCloseTo(0.1, 12)
})
describe('refusals, each at its own path', () => {
  it.each([
    ['sites.0.attachProbability', -0.1], ['sites.0.attachProbability', 1.0001], ['sites.1.attachProbability', 2], ['sites.0.attachProbability', Number.NaN],
    ['medium.diffusionUm2PerS', 0], ['medium.diffusionUm2PerS', -1], ['medium.spacingNm', 50_000], ['medium.spacingNm', Infinity],
    ['ribbon.rows', 0], ['ribbon.rows', 12.5], ['ribbon.columns', -3], ['ribbon.rows', 1e9], ['ribbon.faces', 3],
    ['schedule.durationS', 0], ['schedule.durationS', -1], ['schedule.durationS', 0.01], ['schedule.durationS', 1e6],
    ['schedule.sampleEveryMs', 0], ['schedule.sampleEveryMs', 0.0001], ['schedule.initialFill', 1.2],
    ['reservoir.marginSites', 3], ['title', ''], ['title', '   '], ['title', 'x'.repeat(10_000)], ['sites.0.name', ''],
    ['medium.densityPerUm3', 8000],
  ])('%s = %s', (path, value) => expect(pathsOf(withValue(CONTROL, path, value))).toContain(path))
  it('names each unknown key with its full path', () => {
    const strange = withValue(withValue(CONTROL, 'medium.colour', 'red'), 'sites.0.speed', 3)
    expect(problemsOf(strange)).toEqual(expect.arrayContaining([
      { path: 'medium.colour', message: 'Unknown field.' }, { path: 'sites.0.speed', message: 'Unknown field.' },
    ]))
  })
  it('states the computed occupancy', () =>
    expect(problemsOf(withValue(CONTROL, 'medium.densityPerUm3', 8000))[0]?.message).toContain('1.00'))
  it('wants shares that sum to 1', () => expect(pathsOf(withValue(CONTROL, 'sites.0.share', 0.5))).toEqual(['sites']))
  it('refuses an isolated site of two kinds', () => expect(pathsOf(withValue(CONTROL, 'ribbon', { shape: 'isolated' }))).toContain('sites'))
  it('wants releases in order and inside the duration', () => {
    const releases = [{ atMs: 2000, fraction: 0.5 }, { atMs: 1000, fraction: 0.5 }, { atMs: 90_000, fraction: 0.5 }]
    expect(pathsOf(withValue(CONTROL, 'schedule.releases', releases))).toEqual(['schedule.releases.1.atMs', 'schedule.releases.2.atMs'])
  })
})
it('takes 0 as a probability: recovery never happens, but it can be asked', () => expect(pathsOf(withValue(CONTROL, 'sites.0.attachProbability', 0))).toEqual([]))
it('keeps markup as text and drops override characters', () => {
  const parsed = ScenarioSchema.parse(withValue(CONTROL, 'title', ' <b>\u202Eeman</b> '))
  expect(parsed.title).toBe('<b>eman</b>')
})
