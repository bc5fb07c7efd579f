/**
 * xoshiro128++ (Blackman & Vigna 2021), one state per replicate; the same draws as shared/walk/streams.ts.
 * Hot loops copy s0…s3 into locals and store them back (see vesicles.ts): a global costs a memory access per word.
 */
import { CountTable } from './plan'

export let s0: u32 = 0
export let s1: u32 = 0
export let s2: u32 = 0
export let s3: u32 = 0

/** Stores a state that a hot loop kept in locals. */
export function storeState(a: u32, b: u32, c: u32, d: u32): void {
  s0 = a
  s1 = b
  s2 = c
  s3 = d
}

function mixed(state: u64): u64 {
  let z = (state ^ (state >> 30)) * 0xBF58476D1CE4E5B9
  z = (z ^ (z >> 27)) * 0x94D049BB133111EB
  return z ^ (z >> 31)
}

/** State of a replicate's stream from the seed's two words. */
export function seedStream(low: u32, high: u32, replicate: u32): void {
  const h = (<u64>high << 32) | <u64>low
  const x = h ^ (<u64>replicate * 0xD1342543DE82EF95 + 0x632BE59BD9B4E019)
  const first = mixed(x + 0x9E3779B97F4A7C15), second = mixed(x + 0x3C6EF372FE94F82A)
  storeState(<u32>first, <u32>(first >> 32), <u32>second, <u32>(second >> 32))
  if ((s0 | s1 | s2 | s3) == 0) s0 = 1
}

/** Next 32 bits. */
export function next(): u32 {
  const result = rotl<u32>(s0 + s3, 7) + s0
  const shifted = s1 << 9
  s2 ^= s0
  s3 ^= s1
  s1 ^= s2
  s0 ^= s3
  s2 ^= shifted
  s3 = rotl<u32>(s3, 11)
  return result
}

/** Whole number in [0, n). */
export function below(n: u32): u32 {
  return <u32>((<u64>next() * <u64>n) >> 32)
}

/** True with probability p, to 2^-64; no draw when p <= 0 or p >= 1. */
export function chance(p: f64): bool {
  if (p >= 1) return true
  if (p <= 0) return false
  const limit = <u32>(p * 4294967296), r = next()
  return r == limit ? chanceLeft(p) : r < limit
}

/** The second draw of `chance`, where the first equals the threshold: the next 32 bits of p decide. */
export function chanceLeft(p: f64): bool {
  const scaled = p * 4294967296
  return next() < <u32>((scaled - floor(scaled)) * 4294967296)
}

/** One draw from a table of counts. */
export function drawCount(table: CountTable): i32 {
  const r = next(), last = table.last, thresholds = changetype<usize>(table) + offsetof<CountTable>()
  let k = load<i32>(thresholds + (<usize>(r >>> 24) << 2))
  while (k < last && r >= load<u32>(thresholds + 1024 + (<usize>k << 2))) k++
  return table.first + k
}
