/** The terminal's pictures show the very walk of a run by “step”, and a density that a large bath keeps at rest. */
import { describe, expect, it } from 'vitest'
import { ScenarioSchema, type ScenarioInput } from '../../../shared/schemas/scenario'
import { seedWords } from '../../../shared/walk/streams'
import { layRibbon, ribbonSentence } from '../../../app/utils/ribbonPicture'
import { densityProfile, laySection, sectionSentence } from '../../../app/utils/terminalSection'
import { walkReference } from '../../../workers/reference/walk'
import { densitySection, placeOf, sceneRefusal, SceneWalk, scenePlan } from '../../../workers/scene'

const input: ScenarioInput = {
  format: 'moorage-scenario', version: 1, title: 'Small plate',
  medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' },
  ribbon: { shape: 'plate', rows: 2, columns: 3, faces: 2, classLayout: 'interleaved' }, reservoir: { supply: 'held', marginSites: 5 },
  sites: [{ name: 'quick', share: 0.5, attachProbability: 1 }, { name: 'reluctant', share: 0.5, attachProbability: 0.1 }],
  vesicles: [{ name: 'vesicle', share: 1 }], schedule: { durationS: 2, sampleEveryMs: 50, initialFill: 0.1 },
}
const scenario = ScenarioSchema.parse(input)
const plan = scenePlan(scenario)
const place = placeOf(scenario, plan)

describe('scene', () => {
  it.each([0, 3])('steps replicate %i exactly as a run by “step” walks it', (replicate) => {
    const [low, high] = seedWords('kp-14')
    const block = walkReference(plan, low, high, replicate, replicate + 1)
    const scene = new SceneWalk(plan, 'kp-14', replicate)
    let at = 0
    plan.sampleSteps.forEach((step, i) => {
      const frame = scene.advance(step - at)
      at = step
      const filled = [0, 1].map(kind => frame.sites.reduce((count, state, site) => count + (state > 0 && plan.classOfSite[site] === kind ? 1 : 0), 0))
      expect(filled).toEqual([block.filledSum[0]![i], block.filledSum[1]![i]])
    })
  })
  it('ends with the walk and keeps every vesicle inside the box', () => {
    const frame = new SceneWalk(plan, 'x').advance(1_000_000)
    expect(frame.ended).toBe(true)
    for (let k = 0; k < frame.vesicles.length; k++) {
      expect(frame.vesicles[k]!).toBeGreaterThanOrEqual(0)
      expect(frame.vesicles[k]!).toBeLessThan(place.size[k % 3]!)
    }
  })
  it('knows which side of each site its plate is on', () => {
    expect([...place.siteSides]).toEqual([-1, -1, -1, -1, -1, -1, 1, 1, 1, 1, 1, 1])
    expect(place.plateLayer).toBe(5)
  })
  it('refuses what has no places or too many vesicles, with the reason', () => {
    expect(sceneRefusal(scenario)).toBeNull()
    expect(sceneRefusal(ScenarioSchema.parse({ ...input, reservoir: { supply: 'stirred' } }))).toContain('no places')
    expect(sceneRefusal(ScenarioSchema.parse({ ...input, reservoir: { supply: 'sealed', sizeUm: [5, 5, 5] } }))).toContain('too many to draw')
    expect(() => scenePlan(ScenarioSchema.parse({ ...input, reservoir: { supply: 'stirred' } }))).toThrow(/no places/)
  })
})

describe('density', () => {
  it('stays at rest where nothing attaches', () => {
    const still = ScenarioSchema.parse({ ...input, sites: [{ name: 'all', share: 1, attachProbability: 0 }] })
    const { values } = densitySection(scenePlan(still), 0.5)
    for (const value of values) if (!Number.isNaN(value)) expect(value).toBeCloseTo(1, 6)
  })
  it('is lowest next to the ribbon, rises outwards, and lies near the mean of single walks', () => {
    const timeS = 20 * plan.stepS
    const section = densitySection(plan, timeS)
    const profile = densityProfile(place, section).map(row => Number(row[1]))
    expect(profile[0]!).toBeLessThan(profile[2]!)
    expect(profile[2]!).toBeLessThanOrEqual(profile.at(-1)! + 0.5)
    // The voxels in front of the sites, over 400 walks: the standard error of their mean occupancy is near 1.2 % of rest.
    let counted = 0
    const walks = 400
    const front = new Set(Array.from({ length: place.siteSides.length }, (_, i) => [0, 1, 2].map(axis => place.sites[3 * i + axis]).join()))
    for (let replicate = 0; replicate < walks; replicate++) {
      const { vesicles } = new SceneWalk(plan, 'density', replicate).advance(20)
      for (let k = 0; k < vesicles.length; k += 3) if (front.has([vesicles[k], vesicles[k + 1], vesicles[k + 2]].join())) counted++
    }
    const mean = counted / walks / front.size / plan.occupancy
    const drawn = [5, 6, 7].map(column => section.values[6 * section.width + column]!)
    const meanField = drawn.reduce((sum, value) => sum + value, 0) / drawn.length
    const standardError = Math.sqrt(mean / (walks * front.size * plan.occupancy))
    expect(Math.abs(mean - meanField)).toBeLessThan(4 * standardError + 0.02)
  })
})

describe('pictures', () => {
  it('draw the middle row of sites, filled and empty, and name the scale', () => {
    const frame = new SceneWalk(plan, 'kp-14').advance(20)
    const section = densitySection(plan, 20 * plan.stepS)
    const layout = laySection(place, frame, section, section.row, 420)
    expect(layout.sites).toHaveLength(6)
    expect(layout.sites.some(site => site.square)).toBe(true)
    expect(layout.bar.text).toMatch(/µm|nm/)
    expect(layout.contours.every(contour => !contour.d.includes('NaN'))).toBe(true)
    expect(sectionSentence(place, frame, section)).toMatch(/of 12 sites filled\. Mean vesicle density next to the ribbon is \d+ % of rest\./)
  })
  it('draw the ribbon’s plan with the realised counts of each kind, cut where it is large', () => {
    const layout = layRibbon({ ...scenario, ribbon: { shape: 'plate', rows: 4, columns: 6, faces: 2, classLayout: 'interleaved', count: 1 }, sites: [{ ...scenario.sites[0]!, share: 0.6 }, { ...scenario.sites[1]!, share: 0.4 }] }, 760)
    expect(layout.sitesPerClass).toEqual([29, 19])
    expect(layout.faces.flatMap(face => face.sites).filter(site => site.first)).toHaveLength(29)
    expect(layout.legend.remarks).toEqual(['0.6 of 48 sites is 28.8;', '29 are drawn and used'])
    expect(layout.faces[0]!.widthLabel).toBe('300 nm')
    const large = layRibbon({ ...scenario, ribbon: { shape: 'plate', rows: 100, columns: 100, faces: 1, classLayout: 'rows', count: 1 } }, 620)
    expect(large.partial).toBe(true)
    expect(large.faces[0]!.sites.length).toBeLessThan(2500)
    const single = { ...scenario, ribbon: { shape: 'isolated' as const, count: 1 }, sites: [{ ...scenario.sites[0]!, share: 1 }] }
    expect(ribbonSentence(single, layRibbon(single, 358))).toBe('One quick site in the middle of a wide wall.')
  })
})
