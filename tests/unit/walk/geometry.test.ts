/** Boxes: every site has a free voxel before it, hops between voxels are mutual, the edge is what the supply says. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { boxOf, FLAG, hopOffsets, plateInBox, type Box } from '../../../shared/walk/geometry'
import { classesOfSites } from '../../../shared/walk/layout'
import { boundaryOf, freeVoxelsOf } from '../../../workers/placing'
import { compilePlan } from '../../../shared/walk/plan'
import { smallScenario } from './support'

const coordinates = (box: Box, p: number) => [p % (box.nx + 2), Math.floor(p / (box.nx + 2)) % (box.ny + 2), Math.floor(p / (box.nx + 2) / (box.ny + 2))]

describe('a held plate', () => {
  it('on a wall of 2 × 3 with margin 4 has (3 + 8) × (2 + 8) × 5 voxels, its sites in the middle below layer 0', () => {
    const box = boxOf(smallScenario())
    expect([box.nx, box.ny, box.nz, box.freeVoxels]).toEqual([11, 10, 5, 550])
    expect(Array.from(box.voxelOfSite, p => coordinates(box, p))).toEqual([[5, 5, 1], [6, 5, 1], [7, 5, 1], [5, 6, 1], [6, 6, 1], [7, 6, 1]])
    expect(box.flags[0]).toBe(FLAG.reflecting)
    expect(box.flags[box.flags.length - 1]).toBe(FLAG.exchange)
  })
  it('with two faces fills the middle layer of 2 × margin + 1', () => {
    const box = boxOf(smallScenario({ ribbon: { shape: 'plate', rows: 2, columns: 3, faces: 2, classLayout: 'rows' } }))
    expect([box.nx, box.ny, box.nz, box.freeVoxels]).toEqual([11, 10, 9, 990 - 6])
    expect(coordinates(box, box.voxelOfSite[0]!)).toEqual([5, 5, 6])
    expect(coordinates(box, box.voxelOfSite[6]!)).toEqual([5, 5, 4])
    // Below the plate nothing reflects: all six faces of the box exchange.
    expect(box.flags[coordinatesIndex(box, 5, 5, 0)]).toBe(FLAG.exchange)
  })
  it('isolated: one site in the middle of a wall, (2m + 1) × (2m + 1) × (m + 1)', () => {
    const box = boxOf(smallScenario({ ribbon: { shape: 'isolated' }, reservoir: { supply: 'held', marginSites: 10 } }))
    expect([box.nx, box.ny, box.nz]).toEqual([21, 21, 11])
    expect(coordinates(box, box.voxelOfSite[0]!)).toEqual([11, 11, 1])
  })
})
const coordinatesIndex = (box: Box, x: number, y: number, z: number) => (z * (box.ny + 2) + y) * (box.nx + 2) + x

describe('a sealed terminal', () => {
  it('rounds its size to voxels, reflects everywhere, and centres the ribbon from floor((n − size)/2)', () => {
    const box = boxOf(smallScenario({ reservoir: { supply: 'sealed', sizeUm: [0.52, 0.49, 0.31] } }))
    expect([box.nx, box.ny, box.nz]).toEqual([10, 10, 6])
    expect(box.flags.includes(FLAG.exchange)).toBe(false)
    expect(coordinates(box, box.voxelOfSite[0]!)).toEqual([4, 5, 1])
  })
  it('refuses a ribbon that does not fit, or a free plate against a wall', () => {
    expect(() => boxOf(smallScenario({ reservoir: { supply: 'sealed', sizeUm: [0.1, 0.5, 0.5] } }))).toThrow(/does not fit/)
    expect(() => boxOf(smallScenario({ ribbon: { shape: 'plate', rows: 1, columns: 1, faces: 2, classLayout: 'rows' }, reservoir: { supply: 'sealed', sizeUm: [0.5, 0.5, 0.1] } }))).toThrow(/free voxel on both sides/)
    expect(() => plateInBox([5, 5, 5], { columns: 2, rows: 2, faces: 1, x: 4, y: 0, z: 0 }, 'held')).toThrow(RangeError)
  })
})

it('puts each site behind exactly one face of exactly one free voxel', () => {
  const scenario = fc.record({
    rows: fc.integer({ min: 1, max: 4 }), columns: fc.integer({ min: 1, max: 4 }), faces: fc.constantFrom(1 as const, 2 as const), held: fc.boolean(),
  }).map(({ held, ...plate }) => smallScenario({
    ribbon: { shape: 'plate', classLayout: 'interleaved', ...plate }, reservoir: held ? { supply: 'held', marginSites: 4 } : { supply: 'sealed', sizeUm: [0.3, 0.25, 0.35] },
  }))
  fc.assert(fc.property(scenario, (one) => {
    const plan = compilePlan(one), offsets = hopOffsets(plan.nx, plan.ny), seen: number[] = []
    expect(freeVoxelsOf(plan)).toHaveLength(plan.freeVoxels)
    plan.siteBehind.forEach((site, at) => {
      if (site < 0) return
      const p = Math.floor(at / 6)
      expect(plan.flags[p]).toBe(FLAG.free)
      expect(plan.flags[p + offsets[at % 6]!]).toBe(FLAG.sites)
      expect(plan.voxelOfSite[site]).toBe(p)
      seen.push(site)
    })
    expect(seen.sort((a, b) => a - b)).toEqual(Array.from({ length: plan.siteCount }, (_, i) => i))
    const { nx, ny, nz } = plan, open = one.ribbon.shape === 'plate' && one.ribbon.faces === 1 ? 1 : 2
    expect(boundaryOf(plan)).toHaveLength(plan.supply === 'held' ? open * nx * ny + 2 * nz * (nx + ny) : 0)
  }), { numRuns: 60, seed: 4 })
})

describe('layouts', () => {
  it('rows: class 0 takes the first sites', () => expect([...classesOfSites([3, 2], 'rows')]).toEqual([0, 0, 0, 1, 1]))
  it('interleaved: class 0 where floor((i + 1)·n₀/S) rises', () => {
    expect([...classesOfSites([3, 2], 'interleaved')]).toEqual([1, 0, 1, 0, 0])
    expect([...classesOfSites([1, 3], 'interleaved')]).toEqual([1, 1, 1, 0])
  })
  it('keep the counts whatever they are', () => fc.assert(fc.property(fc.nat(40), fc.nat(40), fc.constantFrom('rows' as const, 'interleaved' as const), (first, second, layout) => {
    fc.pre(first + second > 0)
    const classes = classesOfSites([first, second], layout)
    expect(classes.filter(one => one === 0)).toHaveLength(first)
    expect(classes).toHaveLength(first + second)
  }), { seed: 5 }))
})
