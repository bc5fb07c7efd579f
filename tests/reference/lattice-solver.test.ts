/** Standard solutions for the deterministic lattice solver, K-01 to K-12. */
import { describe, expect, it } from 'vitest'
import { lineDecay, stepLine, type LineEnd } from '../../shared/kinetics/line-lattice'
import { meanExitTime, resistanceRoots, resistantSheetUptake, sheetUptake, sphereSheetUptake } from '../../shared/kinetics/sheets'
import { erfc, erfcx } from '../../shared/kinetics/special'
import { expectRelative } from './support'

const wall: LineEnd = { kind: 'reflect' }
const total = (line: Float64Array) => line.reduce((sum, mass) => sum + mass, 0)

/** Fraction taken up at T = Dt/l² by a half sheet of `voxels`; the held surface lies on the far face, half a voxel beyond the last centre. */
function sheetBySolver(voxels: number, time: number): number {
  const line = new Float64Array(voxels)
  for (let n = 0; n < Math.round(6 * time * voxels ** 2); n++) {
    // Surface density 1 on the face: the voxel behind it holds 2 − its neighbour.
    stepLine(line, wall, { kind: 'held', density: 2 - line[voxels - 1]! })
  }
  return total(line) / voxels
}

describe('sheets and spheres', () => {
  const times = [0.01, 0.05, 0.1, 0.2, 0.5, 1]
  it('K-01 plane sheet, surface held, Crank 1975 ch. 4', () => {
    expectRelative(times.map(sheetUptake), [0.1128379167, 0.2523132522, 0.3568234005, 0.5040878202, 0.7639503307, 0.9312596785], 1e-9)
    expect(sheetUptake(0.1967307395)).toBeCloseTo(0.5, 9)
    expect(Math.abs(sheetUptake(0.0299999) / sheetUptake(0.0300001) - 1)).toBeLessThan(1e-5)
  })
  it('K-01 the lattice solver at 40 voxels, within 0.5 %', () => {
    for (const time of [0.05, 0.1, 0.2, 0.5, 1]) expect(Math.abs(sheetBySolver(40, time) / sheetUptake(time) - 1)).toBeLessThan(0.005)
  })
  it('K-02 sphere, surface held, Crank 1975 ch. 6', () => {
    expectRelative(times.map(sphereSheetUptake), [0.3085137501, 0.6069397567, 0.770478738, 0.9154955661, 0.9956278588, 0.9999685561], 1e-9)
    expect(sphereSheetUptake(0.0305465243)).toBeCloseTo(0.5, 9)
  })
  it('K-03 sheet with surface resistance, L = 1, Crank 1975 ch. 4; Carslaw & Jaeger 1959 app. IV', () => {
    expectRelative(resistanceRoots(1, 4), [0.86033359, 3.42561846, 6.43729818, 9.52933441], 5e-9)
    expectRelative([0.1, 0.5, 1, 2].map(T => resistantSheetUptake(1, T)), [0.080403253, 0.31889545, 0.52960275, 0.775606], 1e-7)
  })
  it('K-04 the same, L = 0.1 and 10', () => {
    expectRelative([resistanceRoots(0.1, 1)[0]!, resistanceRoots(10, 1)[0]!], [0.31105285, 1.42887001], 2e-8)
    expectRelative([0.1, 0.5, 1, 2].map(T => resistantSheetUptake(0.1, T)), [0.0097670232, 0.047426015, 0.092412921, 0.17611115], 1e-7)
    expectRelative([0.1, 0.5, 1, 2].map(T => resistantSheetUptake(10, T)), [0.27388228, 0.68498373, 0.88650436, 0.98526693], 1e-7)
  })
})

describe('lines', () => {
  it('K-05 steady slab is a straight line on the lattice too (derivation)', () => {
    const line = Float64Array.from({ length: 20 }, (_unused, i) => 1 - (i + 1) / 21)
    const before = Float64Array.from(line)
    for (let n = 0; n < 1000; n++) stepLine(line, { kind: 'held', density: 1 }, { kind: 'held', density: 0 })
    line.forEach((mass, i) => expect(Math.abs(mass - before[i]!)).toBeLessThan(1e-12))
  })
  it('K-06 mean exit time, absorb at 0 and reflect at L (derivation), and by the lattice', () => {
    expect(meanExitTime(0.1, 1, 1)).toBeCloseTo(5, 12)
    expect(meanExitTime(0.1, 1)).toBeCloseTo(3.3333333, 7)
    // With s = 1 the density vanishes one voxel beyond the last centre, so L = N + ½ voxels; exactly (N + 1)(2N + 1) steps from a uniform start.
    const voxels = 100, line = new Float64Array(voxels).fill(1 / voxels)
    let steps = 0
    for (let left = 1; left > 1e-14; left = total(line)) {
      steps += left
      stepLine(line, { kind: 'attach', probability: 1 }, wall)
    }
    expect(steps / (101 * 201)).toBeCloseTo(1, 10)
    expect(Math.abs(steps / 6 / 0.1 / meanExitTime(0.1, voxels + 0.5) - 1)).toBeLessThan(0.006)
  })
  it('K-07 exact decay between reflecting walls (discrete cosine basis)', () => {
    expectRelative([1, 2, 3].map(m => lineDecay('reflecting', 10, m)), [0.9836855054, 0.9363389981, 0.8625950841], 1e-10)
    expectRelative([1, 2, 3].map(m => lineDecay('reflecting', 10, m) ** 100), [0.1930310675, 0.001390948961, 3.808008233e-7], 1e-9)
    for (const m of [1, 2, 3]) {
      const line = Float64Array.from({ length: 10 }, (_unused, j) => Math.cos(Math.PI * m * (j + 0.5) / 10)), start = line[0]!
      for (let n = 0; n < 100; n++) stepLine(line, wall, wall)
      expect(line[0]! / start / lineDecay('reflecting', 10, m) ** 100).toBeCloseTo(1, 8)
    }
  })
  it('K-08 exact decay around a ring (Fourier basis)', () => {
    expectRelative([1, 2, 3].map(m => lineDecay('periodic', 10, m)), [0.9363389981, 0.7696723315, 0.5636610019], 1e-10)
    const line = Float64Array.from({ length: 10 }, (_unused, j) => Math.cos(2 * Math.PI * j / 10))
    for (let n = 0; n < 50; n++) stepLine(line, { kind: 'periodic' }, { kind: 'periodic' })
    expect(line[0]! / lineDecay('periodic', 10, 1) ** 50).toBeCloseTo(1, 10)
  })
  it('K-09 exact decay, absorbing at one end (sine basis), and by iteration', () => {
    expectRelative([10, 20].map(N => lineDecay('absorbing-reflecting', N, 1)), [0.9962769421, 0.9990219337], 1e-10)
    const line = new Float64Array(10).fill(1)
    let before = 0
    for (let n = 0; n < 5000; n++) {
      before = total(line)
      stepLine(line, { kind: 'attach', probability: 1 }, wall)
    }
    expect(total(line) / before).toBeCloseTo(lineDecay('absorbing-reflecting', 10, 1), 12)
  })
  it('K-10 survival from a uniform start, N = 10', () => {
    const line = new Float64Array(10).fill(0.1), seen: number[] = []
    for (let n = 1; n <= 300; n++) {
      stepLine(line, { kind: 'attach', probability: 1 }, wall)
      if ([10, 100, 300].includes(n)) seen.push(total(line))
    }
    expectRelative(seen, [0.8971317683, 0.5871243944, 0.2769410225], 1e-9)
  })
  it('K-11 conserves mass, stays non-negative, and its error falls fourfold when the voxel halves', () => {
    const line = new Float64Array(30)
    line[3] = 1
    for (let n = 0; n < 5000; n++) stepLine(line, wall, wall)
    expect(Math.abs(total(line) - 1)).toBeLessThan(1e-12)
    expect(Math.min(...line)).toBeGreaterThanOrEqual(0)
    const error = (voxels: number) => Math.abs(sheetBySolver(voxels, 0.5) - sheetUptake(0.5))
    expect(error(20) / error(40)).toBeGreaterThan(3.5)
    expect(error(20) / error(40)).toBeLessThan(4.5)
  })
})

describe('K-12 error functions, Abramowitz & Stegun ch. 7', () => {
  it('erfcx and erfc', () => {
    expectRelative([0.1, 0.5, 1, 2, 5, 10].map(erfcx), [0.89645698, 0.61569034, 0.42758358, 0.25539568, 0.11070464, 0.056140993], 3e-8)
    expectRelative([erfc(5)], [1.5374598e-12], 2e-8)
  })
})
