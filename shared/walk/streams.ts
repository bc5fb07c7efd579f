/**
 * Random numbers: seed text → 64-bit h (seedrandom, ARC4) → one xoshiro128++ stream per replicate.
 * A replicate's stream follows from (h, replicate) alone, never from a worker or an order of completion.
 * Blackman & Vigna, "Scrambled linear pseudorandom number generators" (2021), for xoshiro128++; Steele, Lea & Flood (2014) for SplitMix64.
 */
import seedrandom from 'seedrandom'

export type State = [number, number, number, number]
const WORD = 4294967296
const MASK = (1n << 64n) - 1n
const GOLDEN = 0x9E3779B97F4A7C15n

/**
 * The two words of a seed text, low first.
 * @param text - seed, at most 200 characters (any text, the empty one too)
 * @returns low and high word, unsigned [1]
 */
export function seedWords(text: string): [low: number, high: number] {
  const generator = seedrandom(text)
  const low = generator.int32() >>> 0
  return [low, generator.int32() >>> 0]
}

/**
 * One output of SplitMix64 and the state after it.
 * @param state - 64-bit state [1]
 * @returns next state and output [1]
 */
export function splitMix64(state: bigint): { state: bigint, output: bigint } {
  const next = (state + GOLDEN) & MASK
  let mixed = ((next ^ (next >> 30n)) * 0xBF58476D1CE4E5B9n) & MASK
  mixed = ((mixed ^ (mixed >> 27n)) * 0x94D049BB133111EBn) & MASK
  return { state: next, output: mixed ^ (mixed >> 31n) }
}

/**
 * xoshiro128++ state from a 64-bit number: two SplitMix64 outputs as words low, high, low, high. All-zero (forbidden) becomes 1, 0, 0, 0.
 * @param seed - 64-bit number [1]
 * @returns four words [1]
 */
export function stateFrom(seed: bigint): State {
  const first = splitMix64(seed & MASK), second = splitMix64(first.state)
  const state = [first.output, second.output].flatMap(word => [Number(word & 0xFFFFFFFFn), Number(word >> 32n)]) as State
  return state.every(word => word === 0) ? [1, 0, 0, 0] : state
}

/**
 * State of a replicate's stream: x = h xor (k·0xD1342543DE82EF95 + 0x632BE59BD9B4E019), then `stateFrom(x)`.
 * @param low - low word of h [1]
 * @param high - high word of h [1]
 * @param replicate - number of the replicate, from 0 [1]
 * @returns four words [1]
 */
export function stateOf(low: number, high: number, replicate: number): State {
  const h = (BigInt(high >>> 0) << 32n) | BigInt(low >>> 0)
  return stateFrom(h ^ ((BigInt(replicate) * 0xD1342543DE82EF95n + 0x632BE59BD9B4E019n) & MASK))
}

/** xoshiro128++ with the draws that the walk makes of it. The order of draws is part of the kernel's contract. */
export class Stream {
  constructor(private readonly state: State) {}

  /** Next 32 bits, unsigned. */
  next(): number {
    const s = this.state
    const sum = s[0] + s[3] | 0
    const result = ((sum << 7 | sum >>> 25) + s[0]) >>> 0
    const shifted = s[1] << 9
    s[2] ^= s[0]
    s[3] ^= s[1]
    s[1] ^= s[2]
    s[0] ^= s[3]
    s[2] ^= shifted
    s[3] = s[3] << 11 | s[3] >>> 21
    return result
  }

  /** Whole number in [0, n), floor(n·r/2³²); bias below n/2³². */
  below(n: number): number {
    const r = this.next()
    return Math.floor(((r >>> 16) * n + Math.floor((r & 0xFFFF) * n / 65536)) / 65536)
  }

  /** True with probability p, to 2⁻⁶⁴: 32 bits decide, and 32 more only when the first equal the threshold's. No draw when p ≤ 0 or p ≥ 1. */
  chance(p: number): boolean {
    if (p >= 1) return true
    if (p <= 0) return false
    const scaled = p * WORD, whole = Math.floor(scaled)
    const r = this.next()
    return r === whole ? this.next() < Math.floor((scaled - whole) * WORD) : r < whole
  }
}
