// Draws made ahead: the generator runs over a short buffer with its state in locals, and the walk reads from it off the critical path.
import { s0, s1, s2, s3, storeState } from './rng'

/** Bytes of the buffer: 256 draws. */
const BUFFER: usize = 1024
/** An event takes at most 6 draws; this many bytes are kept ready. */
export const AHEAD: usize = 64

let base: usize = 0
/** Next draw. */
export let cursor: usize = 0
/** Beyond this there are fewer than AHEAD bytes left. */
export let brink: usize = 0

/** Begins a replicate: the stream has been seeded, nothing is buffered. */
export function openDraws(buffer: usize): void {
  base = buffer
  cursor = buffer + BUFFER
  brink = buffer + BUFFER - AHEAD
  refill(cursor)
}

/** Moves what is left to the front and fills up, so that the order of draws is the stream's own. */
export function refill(at: usize): void {
  const left = base + BUFFER - at
  memory.copy(base, at, left)
  let a = s0, b = s1, c = s2, d = s3
  const end = base + BUFFER
  for (let to = base + left; to < end; to += 4) {
    store<u32>(to, rotl<u32>(a + d, 7) + a)
    const shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotl<u32>(d, 11)
  }
  storeState(a, b, c, d)
  cursor = base
}

/** Where a hot loop has come to. */
export function setCursor(at: usize): void {
  cursor = at
}

/** Next 32 bits outside the hot loop. */
export function draw(): u32 {
  if (cursor > brink) refill(cursor)
  const value = load<u32>(cursor)
  cursor += 4
  return value
}

/** True with probability p, to 2^-32. */
export function drawChance(p: f64): bool {
  return <f64>draw() < p * 4294967296
}
