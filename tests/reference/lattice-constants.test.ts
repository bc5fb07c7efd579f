/** Constants of the lattice walk, L-01 to L-14, against published constants, two ways of computing them, and seeded walks. */
import { describe, expect, it } from 'vitest'
import * as lattice from '../../shared/kinetics/lattice-constants'
import { Stream, seedWords, stateOf } from '../../shared/walk/streams'
import { expectRelative, expectWithin4Se } from './support'

const streamOf = (seed: string) => new Stream(stateOf(...seedWords(seed), 0))

/** Γ for the published gamma form: Stirling's series beyond 20, recurrence below. */
function gamma(x: number): number {
  if (x < 20) return gamma(x + 1) / x
  const series = 1 / (12 * x) - 1 / (360 * x ** 3) + 1 / (1260 * x ** 5) - 1 / (1680 * x ** 7)
  return Math.sqrt(2 * Math.PI / x) * (x / Math.E) ** x * Math.exp(series)
}

describe('Watson\'s integral', () => {
  const u = lattice.latticeVisits()
  it('L-01 by three forms, Watson 1939 Q J Math 10:266; Glasser & Zucker 1977 PNAS 74:1800', () => {
    expect(Math.abs(u - 1.516386059151978)).toBeLessThan(1e-15)
    const gammaForm = Math.sqrt(6) / (32 * Math.PI ** 3) * gamma(1 / 24) * gamma(5 / 24) * gamma(7 / 24) * gamma(11 / 24)
    expect(Math.abs(gammaForm / u - 1)).toBeLessThan(1e-13)
    expect(Math.abs(lattice.visitsTo(0, 0, 0) / u - 1)).toBeLessThan(1e-12)
  })
  it('L-02 to L-04 return, Green value, escape; Pólya 1921', () => {
    expect(Math.abs(lattice.returnProbability() - 0.3405373295509991)).toBeLessThan(1e-15)
    expect(u / 3).toBeCloseTo(0.505462019717326, 14)
    expect(u / 6).toBeCloseTo(0.252731009858663, 14)
    expect(1 / u).toBeCloseTo(0.6594626704490009, 14)
  })
  const points = [[1, 0, 0], [1, 1, 0], [1, 1, 1], [2, 0, 0], [3, 0, 0], [5, 0, 0]] as const
  it('L-05 visits to other points (Bessel integral), far field 3/(2πr)', () => {
    const visits = points.map(([x, y, z]) => lattice.visitsTo(x, y, z))
    expectRelative(visits, [0.516386059, 0.331148602, 0.261470126, 0.257335887, 0.165270781, 0.096606452], 1e-8)
    expect(visits[0]).toBeCloseTo(u - 1, 12)
    expect(visits[5]! / (3 / (2 * Math.PI * 5))).toBeCloseTo(1.0117, 3)
  })
  it('L-06 chance ever to hit those points', () => {
    expectRelative(points.map(([x, y, z]) => lattice.visitsTo(x, y, z) / u), [0.34053733, 0.218380141, 0.172429788, 0.169703411, 0.108989911, 0.063708349], 1e-8)
  })
})

describe('sites and walls', () => {
  it('L-07 isolated face on a reflecting wall (image method, own derivation)', () => {
    expect(lattice.faceResistance()).toBeCloseTo(0.3387953531, 10)
    expectRelative([0.01, 0.05, 0.1, 0.25, 0.5, 1].map(lattice.isolatedFaceRate), [0.009966235, 0.04916712, 0.09672307, 0.23047872, 0.42757054, 0.74694015], 1e-7)
  })
  it('L-08 visits to a wall cell, 2u − 1, and by seeded walks after the tail 4(3/2π)^(3/2)/√T', () => {
    const exact = 2 * lattice.latticeVisits() - 1, walks = 20_000, steps = 1000, stream = streamOf('wall cell')
    expect(exact).toBeCloseTo(2.0327721183, 10)
    let sum = 0, squares = 0
    for (let w = 0; w < walks; w++) {
      let x = 0, y = 0, z = 0, visits = 1
      for (let n = 0; n < steps; n++) {
        const d = stream.below(6), sign = d & 1 ? -1 : 1
        if (d < 2) x += sign
        else if (d < 4) y += sign
        else z = Math.max(0, z + sign) // refused by the wall: stays
        if (x === 0 && y === 0 && z === 0) visits++
      }
      sum += visits
      squares += visits * visits
    }
    const mean = sum / walks, se = Math.sqrt((squares / walks - mean * mean) / walks)
    expectWithin4Se(mean, exact - 4 * (3 / (2 * Math.PI)) ** 1.5 / Math.sqrt(steps), se)
  })
  it('L-09 bulk target cell (return counting, own derivation)', () => {
    expectRelative([0.01, 0.1, 0.5, 1].map(lattice.bulkCellRate), [0.009948627, 0.0950897, 0.3973953, 0.65946267], 1e-7)
  })
  it('L-10, L-11 equivalent radii against Smoluchowski\'s sphere and Hill\'s disk', () => {
    const { sphere, disk } = lattice.equivalentRadii()
    expect(sphere).toBeCloseTo(0.3148702314, 10)
    expect(disk).toBeCloseTo(0.1867350372, 9)
  })
  it('L-12 return within T steps, tail of 2(3/(2πn))^(3/2), and by seeded walks', () => {
    expect(lattice.returnProbabilityWithin(4000)).toBeCloseTo(0.336, 5)
    const walks = 20_000, steps = 400, stream = streamOf('return')
    let returned = 0
    for (let w = 0; w < walks; w++) {
      const at = [0, 0, 0]
      for (let n = 0; n < steps; n++) {
        const d = stream.below(6)
        at[d >> 1]! += d & 1 ? -1 : 1
        if (at[0] === 0 && at[1] === 0 && at[2] === 0) {
          returned++
          break
        }
      }
    }
    const p = lattice.returnProbabilityWithin(steps)
    expectWithin4Se(returned / walks, p, Math.sqrt(p * (1 - p) / walks))
  })
  it('L-13 attempts into a reflecting wall (lazy walk on a line)', () => {
    expectRelative([10, 100, 1000].map(lattice.wallAttempts), [1.028682317, 4.129592884, 14.07459515], 1e-9)
    expect(Math.sqrt(2000 / (3 * Math.PI)) - 0.5).toBeCloseTo(14.0673, 4)
  })
  it('L-14 returns on a line, Feller vol. 1 ch. III', () => {
    expectRelative([5, 50, 500].map(lattice.lineReturns), [1.70703125, 7.038512976, 24.2502432], 1e-9)
  })
})
