/** The almanac: sources complete, presets valid and covered, cautions that fire when and only when they should. */
import { describe, expect, it } from 'vitest'
import { assumptionsFor } from '../../../shared/almanac/assumptions'
import { cautionsFor } from '../../../shared/almanac/cautions'
import { DEMO_SCENARIOS, SAMPLE_SCENARIO } from '../../../shared/almanac/demo-scenarios'
import { PRESETS } from '../../../shared/almanac/presets'
import { PUBLISHED_RANGES, publishedRange } from '../../../shared/almanac/ranges'
import { unitSlip } from '../../../shared/almanac/slips'
import { ScenarioSchema } from '../../../shared/schemas/scenario'
import { UNITS } from '../../../shared/units'
import { compilePlan } from '../../../shared/walk/plan'
import { scenarioWith, type Bend } from '../kinetics/support'

const ids = (bend: Bend) => cautionsFor(scenarioWith(bend)).map(caution => caution.id)
const held = { reservoir: { supply: 'held' as const, marginSites: 12 } }

describe('published ranges', () => {
  it('have unique ids, a source, a status, and ends in order', () => {
    expect(new Set(PUBLISHED_RANGES.map(range => range.id)).size).toBe(PUBLISHED_RANGES.length)
    expect(PUBLISHED_RANGES.length).toBe(57)
    for (const range of PUBLISHED_RANGES) {
      expect(range.source.length).toBeGreaterThan(3)
      expect(range.value.length).toBeGreaterThan(2)
      if (range.low !== undefined) {
        expect(range.high).toBeGreaterThanOrEqual(range.low)
        expect(Object.keys(UNITS)).toContain(range.unit)
      }
    }
  })
  it('mark what was not seen in its source', () => {
    expect(publishedRange('H-31').status).toBe('unverified')
    expect(publishedRange('H-30').status).toBe('looked up')
    expect(publishedRange('H-50').status).toBe('common practice')
    expect(() => publishedRange('H-99')).toThrow(RangeError)
  })
})

describe('presets', () => {
  it('are valid documents that compile', () => {
    expect(PRESETS.length).toBeGreaterThanOrEqual(6)
    for (const preset of PRESETS) {
      expect(ScenarioSchema.parse(JSON.parse(JSON.stringify(preset.scenario)))).toEqual(preset.scenario)
      expect(compilePlan(preset.scenario).steps).toBeGreaterThan(20)
    }
  })
  it.each(PRESETS.map(preset => [preset.id, preset] as const))('%s: each number has a source at a path that exists', (_id, preset) => {
    const paths = preset.sources.map(source => source.path)
    for (const path of ['medium.spacingNm', 'medium.diffusionUm2PerS', 'medium.densityPerUm3', 'ribbon.count', 'schedule.durationS', 'reservoir.marginSites', 'schedule.initialFill']) expect(paths).toContain(path)
    preset.scenario.sites.forEach((_site, j) => expect(paths).toContain(`sites.${j}.attachProbability`))
    for (const path of paths) expect(path.split('.').reduce<unknown>((part, key) => (part as Record<string, unknown>)[key], preset.scenario)).toBeDefined()
    for (const { source } of preset.sources) for (const [id] of source.matchAll(/H-\d\d/g)) expect(publishedRange(id!).id).toBe(id)
  })
})

describe('demo bench', () => {
  it('is invented, says so, and has the six scenarios', () => {
    expect(DEMO_SCENARIOS.map(demo => demo.key)).toEqual(['control', 'ak-7', 'tp-4', 'short', 'stirred', 'exclusive'])
    for (const { scenario } of [...DEMO_SCENARIOS, { scenario: SAMPLE_SCENARIO }]) {
      expect(scenario.notes).toMatch(/^Invented/)
      expect(ScenarioSchema.parse(scenario)).toEqual(scenario)
    }
  })
})

describe('cautions', () => {
  it('leave the stirred demo scenario alone', () => expect(cautionsFor(SAMPLE_SCENARIO)).toEqual([]))
  it.each<[string, Bend, string]>([
    ['fast diffusion', { medium: { diffusionUm2PerS: 2 } }, 'A-04'],
    ['faster than water', { medium: { diffusionUm2PerS: 50 } }, 'A-04'],
    ['slow diffusion', { medium: { diffusionUm2PerS: 0.0005 } }, 'A-04'],
    ['wide spacing', { medium: { spacingNm: 100, densityPerUm3: 200 } }, 'A-05'],
    ['narrow spacing', { medium: { spacingNm: 20 } }, 'A-05'],
    ['crowded', { medium: { densityPerUm3: 2500 } }, 'A-03'],
    ['dense', { medium: { densityPerUm3: 5000 } }, 'density'],
    ['plate with held supply', held, 'A-01'],
    ['isolated, eager', { ...held, ribbon: { shape: 'isolated' }, sites: [{ name: 'one', share: 1, attachProbability: 1 }] }, 'A-01'],
    ['small sealed terminal', { reservoir: { supply: 'sealed', sizeUm: [0.8, 0.8, 0.8] } }, 'A-02'],
    ['tiny probability', { sites: [{ name: 'one', share: 1, attachProbability: 1e-6 }] }, 'beyond'],
    ['no attachment', { sites: [{ name: 'one', share: 1, attachProbability: 0 }] }, 'never'],
    ['share rounded away', { sites: [{ name: 'a', share: 0.995, attachProbability: 0.3 }, { name: 'b', share: 0.005, attachProbability: 0.3 }] }, 'rounded-away'],
    ['nothing to refill', { schedule: { initialFill: 1 } }, 'nothing'],
    ['sparse samples', { schedule: { sampleEveryMs: 1000 } }, 'sparse'],
    ['immobile', { vesicles: [{ name: 'free', share: 0.5 }, { name: 'stuck', share: 0.5, mobilityFactor: 0 }] }, 'A-06'],
  ])('%s', (_name, bend, id) => {
    expect(ids(bend)).toContain(id)
    for (const caution of cautionsFor(scenarioWith(bend))) expect(caution.sentence).toMatch(/^[A-Z0-9τ].*\.$/)
  })
  it('are silent just inside each threshold', () => {
    expect(ids({ medium: { diffusionUm2PerS: 1 } })).not.toContain('A-04')
    expect(ids({ medium: { densityPerUm3: 1990 } })).not.toContain('A-03')
    expect(ids({ ...held, sites: [{ name: 'one', share: 1, attachProbability: 0.05 }] })).not.toContain('A-01')
    expect(ids({ ...held, ribbon: { shape: 'isolated' }, sites: [{ name: 'one', share: 1, attachProbability: 0.3 }] })).not.toContain('A-01')
    expect(ids({ reservoir: { supply: 'sealed', sizeUm: [2, 2, 2] } })).not.toContain('A-02')
  })
  it('state the bound of a free sphere', () => {
    const [caution] = cautionsFor(scenarioWith({ medium: { diffusionUm2PerS: 50 } }))
    expect(caution!.sentence).toContain('9.81')
  })
})

describe('assumptions', () => {
  it('drop out when the scenario models the thing', () => {
    const plain = assumptionsFor(scenarioWith()).map(one => one.id)
    expect(plain).toEqual(expect.arrayContaining(['A-06', 'A-08', 'A-10', 'A-11', 'A-19']))
    const rich = assumptionsFor(scenarioWith({
      sites: [{ name: 'one', share: 1, attachProbability: 0.3, detachPerS: 1, readyPerS: 2 }],
      vesicles: [{ name: 'free', share: 0.5 }, { name: 'stuck', share: 0.5, mobilityFactor: 0 }],
      schedule: { decline: { restFactor: 0.1, timeConstantS: 1 } },
    })).map(one => one.id)
    for (const id of ['A-06', 'A-08', 'A-10', 'A-11']) expect(rich).not.toContain(id)
  })
})

describe('slips of the unit', () => {
  it('are asked back, both ways', () => {
    expect(unitSlip('medium.spacingNm', 50_000)).toEqual({ value: 50, sentence: '50.0\u00A0µm? Vesicles are near 45 nm. 50.0\u00A0nm may be meant.' })
    expect(unitSlip('medium.spacingNm', 0.05)).toMatchObject({ value: 50 })
    expect(unitSlip('reservoir.sizeUm.1', 2000)).toMatchObject({ value: 2 })
  })
  it('are not suspected in plausible values, in values that no slip explains, or elsewhere', () => {
    for (const [path, value] of [['medium.spacingNm', 50], ['medium.spacingNm', 400], ['medium.spacingNm', 0], ['medium.densityPerUm3', 5e6], ['reservoir.sizeUm.0', 2]] as const) expect(unitSlip(path, value)).toBeNull()
  })
})
