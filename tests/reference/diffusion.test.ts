/** Diffusion to targets and walls, D-01 to D-20, against published formulas; digits computed independently with 30-digit arithmetic. */
import { describe, expect, it } from 'vitest'
import * as targets from '../../shared/kinetics/diffusion-targets'
import * as walls from '../../shared/kinetics/diffusion-walls'
import { visitsTo } from '../../shared/kinetics/lattice-constants'
import { stepLine } from '../../shared/kinetics/line-lattice'
import { erf } from '../../shared/kinetics/special'
import { Stream, seedWords, stateOf } from '../../shared/walk/streams'
import { expectRelative, expectWithin4Se } from './support'

const bath = { diffusionUm2PerS: 0.1, perUm3: 1000 }, R = 0.05, times = [0.001, 0.01, 0.1, 1]

describe('spheres', () => {
  it('D-01 steady flux, Smoluchowski 1917 Z Phys Chem 92:129', () => expectRelative([targets.sphereFlux(bath, R)], [62.831853], 1e-8))
  it('D-02 transient, same source', () => expectRelative(times.map(t => targets.sphereFlux(bath, R, t)), [240.07724, 118.88177, 80.556392, 68.436844], 1e-7))
  it('D-03 cumulative, same source', () => expectRelative(times.map(t => targets.sphereUptake(bath, R, t)), [0.41732262, 1.7493168, 9.828093, 74.041835], 1e-7))
  it('D-04 partly reactive, Collins & Kimball 1949 J Colloid Sci 4:425', () => expectRelative([0.1, 1, 10].map(ratio => targets.reactiveSphereFlux(bath, R, ratio)), [5.7119866, 31.415927, 57.119866], 1e-7))
  it.each([
    [1, [52.489346, 42.874343, 35.719891, 32.812836]],
    [0.1, [6.1650499, 6.0133628, 5.846557, 5.7578445]],
    [10, [191.69025, 102.97769, 71.753159, 61.751612]],
  ])('D-05, D-05b transient with ka/kD = %s, Collins & Kimball 1949; Shoup & Szabo 1982 Biophys J 40:33', (ratio, printed) => {
    expectRelative(times.map(t => targets.reactiveSphereFlux(bath, R, ratio, t)), printed, 1e-7)
  })
  it('D-08 absorbing disks, Berg & Purcell 1977 Biophys J 20:193', () => {
    const fraction = (count: number) => targets.patchySphereFraction({ sphereRadiusUm: 0.5, patchRadiusUm: 0.025, count })
    expectRelative([10, 100, 200].map(fraction), [0.13730256, 0.61413045, 0.76094278], 1e-7)
    expect(fraction(20 * Math.PI)).toBeCloseTo(0.5, 12)
  })
  it('D-09 overlap correction, Zwanzig 1990 PNAS 87:5856', () => {
    expectRelative([10, 100, 200].map(count => targets.patchySphereFraction({ sphereRadiusUm: 0.5, patchRadiusUm: 0.025, count }, true)), [0.13804689, 0.62930736, 0.78438178], 1e-7)
  })
  it('D-09b the same on a flat wall, Zwanzig 1990 with R → ∞', () => {
    expectRelative([10, 50, 100].map(sigma => targets.patchyWallRate(0.1, 0.025, sigma)), [0.1, 0.5, 1], 1e-9)
    expectRelative([10, 50, 100].map(sigma => targets.patchyWallRate(0.1, 0.025, sigma, true)), [0.10200282, 0.55443115, 1.2443221], 1e-7)
  })
  it('D-16 first arrival at a sphere, Carslaw & Jaeger 1959', () => {
    expectRelative([0.01, 0.1, 1].map(t => walls.reachedSphere(0.1, 0.05, 0.1, t)), [0.13177624, 0.3618368, 0.45548965], 2e-8)
    expect(walls.reachedSphere(0.1, 0.05, 0.1, 1e12)).toBeCloseTo(0.5, 6)
  })
  it('D-17 mean time to an inner sphere, from D∇²T = −1', () => {
    expectRelative([targets.meanTimeToSphere(0.1, 0.05, 0.5, 0.5), targets.meanTimeToSphereUniform(0.1, 0.05, 0.5)], [7.0875, 6.8485135], 1e-8)
    expect(4 / 3 * Math.PI * (0.5 ** 3 - 0.05 ** 3) / (4 * Math.PI * 0.1 * 0.05)).toBeCloseTo(8.325, 9)
  })
})

describe('disks and plates', () => {
  it('D-06 absorbing disk, Hill 1975 PNAS 72:4918; Berg & Purcell 1977', () => expect(targets.diskFlux(bath, 0.05)).toBeCloseTo(20, 12))
  it('D-07 constant-flux approximation, Shoup, Lipari & Szabo 1981 Biophys J 36:697: not the exact value', () => {
    expectRelative([targets.diskFluxConstant(bath, 0.05)], [18.505508], 1e-7)
    expect(1 - targets.diskFluxConstant(bath, 0.05) / targets.diskFlux(bath, 0.05)).toBeCloseTo(0.0747, 4)
  })
  it('D-10 absorbing plate (Cottrell), Carslaw & Jaeger 1959; Crank 1975', () => {
    expectRelative(times.map(t => walls.plateFlux(bath, t)), [5641.8958, 1784.1241, 564.18958, 178.41241], 1e-7)
    expectRelative(times.map(t => walls.plateUptake(bath, t)), [11.283792, 35.682482, 112.83792, 356.82482], 1e-7)
  })
  it('D-11 profile before a plate, same sources', () => expectRelative([0.1, 0.5, 1, 2].map(erf), [0.11246292, 0.52049988, 0.84270079, 0.99532227], 5e-8))
  it('D-12 partly absorbing plate, Carslaw & Jaeger 1959', () => {
    expectRelative(times.map(t => walls.robinFlux(bath, 1, t)), [896.45698, 723.57844, 427.58358, 170.57772], 1e-7)
    expectRelative(times.map(t => walls.robinUptake(bath, 1, t)), [0.92948967, 8.0403262, 55.596274, 273.8826], 1e-7)
    // Small arguments switch to a series: both sides of the change must meet.
    const below = walls.robinUptake(bath, 1, 0.1 * 0.00299 ** 2), above = walls.robinUptake(bath, 1, 0.1 * 0.00301 ** 2)
    expect(above / below / (0.00301 / 0.00299) ** 2).toBeCloseTo(1, 4)
  })
  it.each([
    ['D-13', 0.1, 435.29045, 57.108069, 435.38984, 57.13185],
    ['D-14', 1, 563.48542, 107.93193, 563.48697, 107.97879],
  ])('%s lattice wall with s = %s as a Robin surface, half-cell argument; compare Erban & Chapman 2007 Phys Biol 4:16', (_id, s, latticeFlux, latticeTotal, formulaFlux, formulaTotal) => {
    const a = 0.01, steps = 600, line = new Float64Array(400).fill(1000 * a ** 3)
    let taken = 0
    for (let n = 0; n < steps; n++) taken += stepLine(line, { kind: 'attach', probability: s }, { kind: 'reflect' })
    const flux = s * line[0]! / 6 / (a * a) / (a * a / 0.6)
    expectRelative([flux, taken / (a * a)], [latticeFlux, latticeTotal], 1e-7)
    const kappa = walls.latticeSurfaceRate(0.1, a, s)
    expectRelative([walls.robinFlux(bath, kappa, 0.1), walls.robinUptake(bath, kappa, 0.1)], [formulaFlux, formulaTotal], 1e-7)
    expectRelative([flux, taken / (a * a)], [formulaFlux, formulaTotal], 5e-4)
  })
  it('D-13 without the half cell is off by 1.8 % in flux and 2.6 % in uptake', () => {
    expect(1 - walls.robinFlux(bath, 1, 0.1) / 435.29045).toBeCloseTo(0.0177, 3)
    expect(1 - walls.robinUptake(bath, 1, 0.1) / 57.108069).toBeCloseTo(0.0265, 3)
  })
  it('D-15 first arrival at a plane, Carslaw & Jaeger 1959', () => {
    expectRelative([0.01, 0.1, 1].map(t => walls.reachedPlane(0.1, 0.1, t)), [0.025347319, 0.47950012, 0.82306327], 2e-8)
  })
  it('D-20 a reflecting wall doubles (method of images), in the continuum and on the lattice', () => {
    // Oblate spheroid, 4πDc·√(a² − h²)/arccos(h/a), flattened to a two-sided disk: 8Dac, twice the disk on a wall.
    expect(2 * targets.diskFlux(bath, R)).toBeCloseTo(4 * Math.PI * 0.1 * 1000 * R / Math.acos(0), 10)
    // Visits along a wall: own cell and its image one spacing below; far away twice the visits without a wall.
    expect((visitsTo(30, 0, 0) + visitsTo(30, 0, 1)) / visitsTo(30, 0, 0)).toBeCloseTo(2, 2)
  })
})

describe('motion', () => {
  it('D-18 free motion, Einstein 1905; Berg 1993: ⟨r²⟩ = 6Dt, n·a² on the lattice', () => {
    expect(walls.freeSpread(0.1, 1)).toBeCloseTo(0.6, 12)
    const [low, high] = seedWords('free motion'), stream = new Stream(stateOf(low, high, 0))
    const walks = 20_000, steps = 60, position = [0, 0, 0]
    let sum = 0
    for (let w = 0; w < walks; w++) {
      position.fill(0)
      for (let n = 0; n < steps; n++) {
        const d = stream.below(6)
        position[d >> 1]! += d & 1 ? -1 : 1
      }
      sum += position.reduce((all, x) => all + x * x, 0)
    }
    expectWithin4Se(sum / walks, steps, steps * Math.sqrt(2 / (3 * walks)))
  })
  it('D-19 confined motion, cosine series of a reflecting box', () => {
    const one = [0.01, 0.1, 1].map(t => walls.confinedSpread(0.1, 0.5, t))
    expectRelative(one, [0.0018096934, 0.013982225, 0.040874285], 5e-8)
    expectRelative(one.map(x => 3 * x), [0.0054290803, 0.041946675, 0.12262285], 5e-8)
    expect(3 * walls.confinedSpread(0.1, 0.5, 100)).toBeCloseTo(0.125, 12)
  })
})
