/** Random numbers against published vectors; the source is named beside each check. */
import seedrandom from 'seedrandom'
import { describe, expect, it } from 'vitest'
import { binomialTable, drawCount, gapTable, GAP_CAP, poissonTable, type CountTable } from '../../shared/walk/counts'
import { seedWords, splitMix64, stateFrom, stateOf, Stream } from '../../shared/walk/streams'

const draws = (stream: Stream, count: number) => Array.from({ length: count }, () => stream.next())
function splitMixOutputs(seed: bigint, count: number): bigint[] {
  let state = seed
  return Array.from({ length: count }, () => {
    const one = splitMix64(state)
    state = one.state
    return one.output
  })
}

describe('xoshiro128++', () => {
  // Blackman & Vigna's reference C, as in the test suite of rust-random/rngs (rand_xoshiro), commit e7874e6e.
  it('gives the published first outputs from state 1, 2, 3, 4', () => expect(draws(new Stream([1, 2, 3, 4]), 10)).toEqual([
    641, 1573767, 3222811527, 3517856514, 836907274, 4247214768, 3867114732, 1355841295, 495546011, 621204420,
  ]))
  // php-src, ext/random, test user_xoshiro128plusplus.phpt.
  it('gives the published output after 102,400 others', () => {
    const stream = new Stream([1, 2, 3, 4])
    for (let i = 0; i < 102_400; i++) stream.next()
    expect(stream.next()).toBe(747060474)
  })
  // x/2^32 of the same outputs (computed).
  it('gives the same as fractions', () => {
    const expected = [1.4924444258213043e-7, 3.664211835712194e-4, 0.7503692822065204, 0.819064796436578, 0.19485765928402543]
    draws(new Stream([1, 2, 3, 4]), 5).forEach((x, i) => expect(x / 2 ** 32 / expected[i]!).toBeCloseTo(1, 14))
  })
  // mean and variance of the first 100,000 of R-19 (computed).
  it('has the mean and variance of a uniform number', () => {
    const stream = new Stream([1, 2, 3, 4]), values = draws(stream, 100_000).map(x => x / 2 ** 32)
    const mean = values.reduce((sum, x) => sum + x, 0) / values.length
    expect(mean).toBeCloseTo(0.49903193908, 9)
    expect(values.reduce((sum, x) => sum + (x - mean) ** 2, 0) / values.length).toBeCloseTo(0.08288416229, 6)
  })
})

describe('SplitMix64', () => {
  // rand_xoshiro tests.
  it('gives rand_xoshiro\'s values', () => expect(splitMixOutputs(1477776061723855037n, 5)).toEqual([
    1985237415132408290n, 2979275885539914483n, 13511426838097143398n, 8488337342461049707n, 15141737807933549159n,
  ]))
  // Steele, Lea & Flood 2014 (OOPSLA), by a public test that quotes it.
  it('gives the values quoted with the paper', () => expect(splitMixOutputs(1234567n, 5)).toEqual([
    6457827717110365317n, 3203168211198807973n, 9817491932198370423n, 4593380528125082431n, 16408922859458223821n,
  ]))
  // computed.
  it('starts from zero as expected', () => expect(splitMixOutputs(0n, 4).map(x => x.toString(16).padStart(16, '0'))).toEqual([
    'e220a8397b1dcdaf', '6e789e6aa1b965f4', '06c45d188009454f', 'f88bb8a8724c81ec',
  ]))
})

describe('seed text', () => {
  // README of seedrandom 3.0.5.
  it('goes through seedrandom as its README says', () => {
    const generator = seedrandom('hello.')
    expect([generator(), generator(), generator.quick(), generator.int32()]).toEqual([0.9282578795792454, 0.3752569768646784, 0.7316977467853576, 1966374204])
  })
  // run with seedrandom 3.0.5: text and number differ, so a seed is always text.
  it('is a text, not a number', () => {
    expect(seedrandom('42')()).toBe(0.00701751618236155)
    expect(seedrandom(42 as unknown as string)()).toBe(0.0016341939679719736)
  })
  it('takes the low word first', () => {
    const generator = seedrandom('harbour'), low = generator.int32(), high = generator.int32()
    expect(seedWords('harbour')).toEqual([low >>> 0, high >>> 0])
  })
  it('takes any text, the empty one too, always alike', () => {
    for (const text of ['', '0', 'ünï – 🚢', 'x'.repeat(200)]) expect(seedWords(text)).toEqual(seedWords(text))
  })
})

describe('streams', () => {
  // own recipe, computed independently.
  it('make a state of two SplitMix64 outputs, words low, high, low, high', () => {
    expect(stateFrom(42n)).toEqual([803958421, 3184996902, 2993090819, 686809907])
    expect(draws(new Stream(stateFrom(42n)), 6)).toEqual([2643743425, 1762251840, 1632151183, 1417845339, 3326664244, 3989346982])
  })
  // The known answer that DEVELOPERS.md prints: text, words, states of replicates 0 and 1.
  it('give the known answer', () => {
    expect(seedWords('moorage')).toEqual(KNOWN.words)
    expect([0, 1].map(replicate => stateOf(...seedWords('moorage'), replicate))).toEqual(KNOWN.states)
  })
  it('never start from the forbidden state of zeros', () => {
    const states = Array.from({ length: 2000 }, (_, k) => stateOf(0, 0, k))
    expect(states.every(state => state.some(word => word !== 0))).toBe(true)
    expect(new Set(states.map(String)).size).toBe(2000)
  })
})

describe('choices', () => {
  // floor(6x/2^32) has a bias below 1.4e-9 per face (derivation).
  it('take a fair direction of six', () => {
    const stream = new Stream(stateFrom(7n)), counts = [0, 0, 0, 0, 0, 0], total = 600_000
    for (let i = 0; i < total; i++) counts[stream.below(6)]!++
    for (const count of counts) expect(Math.abs(count - total / 6)).toBeLessThan(4 * Math.sqrt(total * 5 / 36))
  })
  it('take a whole number below n as floor(n·r/2^32), beyond the 53 bits of a double too', () => {
    for (const n of [1, 6, 85_184, 2 ** 24 - 1, 2 ** 31 - 1]) {
      const one = new Stream(stateFrom(9n)), other = new Stream(stateFrom(9n))
      for (let i = 0; i < 200; i++) expect(one.below(n)).toBe(Number(BigInt(other.next()) * BigInt(n) >> 32n))
    }
  })
  // attach when x < floor(p·2^32) (derivation); a second draw settles the 2^-32 that is left.
  it.each([0.3, 0.0125, 1e-3])('happen with probability %s', (p) => {
    const stream = new Stream(stateFrom(11n)), total = 400_000
    let hits = 0
    for (let i = 0; i < total; i++) if (stream.chance(p)) hits++
    expect(Math.abs(hits - total * p)).toBeLessThan(4 * Math.sqrt(total * p * (1 - p)))
  })
  it('resolve a chance below 2^-32 by the second draw', () => {
    const queue = [0, 0, 0, 1, 5]
    const stream = new Stream([1, 2, 3, 4])
    stream.next = () => queue.shift()!
    const p = 1 / 2 ** 64
    expect([stream.chance(p), stream.chance(p), stream.chance(p)]).toEqual([true, false, false])
    expect(queue).toEqual([])
  })
  it('draw nothing when the answer is certain', () => {
    const stream = new Stream([1, 2, 3, 4])
    expect([stream.chance(0), stream.chance(1), stream.chance(-1), stream.chance(2)]).toEqual([false, true, false, true])
    expect(stream.next()).toBe(641)
  })
})

describe('counts', () => {
  /** Probabilities of a table, from its thresholds. */
  const probabilities = (table: CountTable) => Array.from(table.thresholds, (threshold, k) =>
    ((k === table.thresholds.length - 1 ? 2 ** 32 : threshold) - (k === 0 ? 0 : table.thresholds[k - 1]!)) / 2 ** 32)
  const momentsOf = (table: CountTable) => {
    const weights = probabilities(table), mean = weights.reduce((sum, p, k) => sum + p * (table.first + k), 0)
    return { mean, variance: weights.reduce((sum, p, k) => sum + p * (table.first + k - mean) ** 2, 0) }
  }
  // Mean = variance for a Poisson number (standard).
  it.each([0, 0.02, 1, 7.5, 44, 1234.5, 60_000])('are Poisson with mean %s', (mean) => {
    const moments = momentsOf(poissonTable(mean))
    expect(moments.mean).toBeCloseTo(mean, 4)
    expect(moments.variance / Math.max(mean, 1e-9)).toBeCloseTo(mean === 0 ? 0 : 1, 4)
  })
  // np and np(1-p) for a binomial number (standard).
  it.each([[10, 0.5], [17_155, 0.0021], [48, 1], [48, 0], [3, 0.999]])('are binomial of %s trials with chance %s', (trials, chance) => {
    const moments = momentsOf(binomialTable(trials, chance))
    expect(moments.mean).toBeCloseTo(trials * chance, 4)
    expect(moments.variance).toBeCloseTo(trials * chance * (1 - chance), 4)
  })
  it('leave gaps between rare events as a geometric law does', () => {
    const weights = probabilities(gapTable(0.03))
    expect(weights).toHaveLength(GAP_CAP + 1)
    weights.slice(0, GAP_CAP).forEach((p, k) => expect(p).toBeCloseTo(0.03 * 0.97 ** k, 8))
    expect(weights[GAP_CAP]).toBeCloseTo(0.97 ** GAP_CAP, 8)
  })
  it('are drawn as the table says', () => {
    const table = poissonTable(3), stream = new Stream(stateFrom(5n)), total = 200_000, counts = new Map<number, number>()
    for (let i = 0; i < total; i++) {
      const k = drawCount(table, stream)
      counts.set(k, (counts.get(k) ?? 0) + 1)
    }
    for (let k = 0, p = Math.exp(-3); k < 9; p *= 3 / ++k) expect(Math.abs((counts.get(k) ?? 0) - total * p)).toBeLessThan(4 * Math.sqrt(total * p))
  })
})

const KNOWN = {
  words: [3548869599, 668289804],
  states: [[1685173372, 117896964, 3149647906, 1365790621], [1962609899, 1171209227, 4136439473, 807195413]],
}
