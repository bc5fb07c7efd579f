/** Differences between two scenarios are named field by field, with units. */
import { expect, it } from 'vitest'
import { differenceSentence, scenarioDifferences, valueWords } from '../../../shared/schemas/differences'
import { ScenarioSchema } from '../../../shared/schemas/scenario'
import { withValue } from '../../../app/utils/paths'
import { CONTROL } from '../../fixtures/control'

const control = ScenarioSchema.parse(CONTROL)

it('is empty for equal documents', () => expect(scenarioDifferences(control, ScenarioSchema.parse(CONTROL))).toEqual([]))
it('names the kind of site and the unit', () => {
  const [only, ...none] = scenarioDifferences(control, withValue(control, 'sites.0.attachProbability', 0.15))
  expect(none).toEqual([])
  expect(only).toMatchObject({ path: 'sites.0.attachProbability', label: 'Quick: attachment', symbol: 's', unit: 'per hit', before: 0.3, after: 0.15 })
})
it('tells what was added and removed', () => {
  const sealed = withValue(control, 'reservoir', { supply: 'sealed', sizeUm: [2, 2, 2] })
  const paths = scenarioDifferences(control, sealed).map(one => one.path)
  expect(paths).toEqual(['reservoir.supply', 'reservoir.marginSites', 'reservoir.sizeUm.0', 'reservoir.sizeUm.1', 'reservoir.sizeUm.2'])
  expect(differenceSentence(scenarioDifferences(control, sealed))).toBe('Supply held to sealed; Bath held from removed; Length of the terminal added, 2 µm; and 2 more')
})
it('tells a list that became empty', () => {
  const released = withValue(control, 'schedule.releases', [{ atMs: 2000, fraction: 0.5 }])
  expect(scenarioDifferences(released, control).map(one => [one.path, one.before, one.after])).toEqual([
    ['schedule.releases.0.atMs', 2000, undefined], ['schedule.releases.0.fraction', 0.5, undefined], ['schedule.releases', undefined, 'none'],
  ])
})
it('prints a typographic minus and the unit', () => expect(valueWords(-0.5, 's')).toBe('\u22120.5 s'))
