// Alias rows and geometric digits: draws from fixed laws by one 32-bit number, with no logarithm.

/*
 * A row of n cells (n ≤ 65536) holds one u32 a cell: threshold in the high half, the other outcome in the low half.
 * The product r·n of a 32-bit draw picks the cell (high word) and decides inside it (upper half of the low word).
 * Rounding thresholds to 2^-16 of a cell moves at most 2^-17 of the law's mass.
 */

/** Fills `cells` from `weights` (f64, sum `total`); `stack` has room for 2·count u32. Weights are destroyed. */
export function aliasRow(weights: usize, count: i32, total: f64, cells: usize, stack: usize): void {
  const scale = <f64>count / total
  const large = stack + (<usize>count << 2)
  let smallCount = 0
  let largeCount = 0
  for (let i = 0; i < count; i++) {
    const share = load<f64>(weights + (<usize>i << 3)) * scale
    store<f64>(weights + (<usize>i << 3), share)
    store<u32>(cells + (<usize>i << 2), 0xFFFF0000 | <u32>i)
    if (share < 1) store<u32>(stack + (<usize>(smallCount++) << 2), i)
    else store<u32>(large + (<usize>(largeCount++) << 2), i)
  }
  while (smallCount > 0 && largeCount > 0) {
    const low = load<u32>(stack + (<usize>--smallCount << 2))
    const high = load<u32>(large + (<usize>(largeCount - 1) << 2))
    const share = load<f64>(weights + (<usize>low << 3))
    const threshold = <u32>(share * 65536.0 + 0.5)
    if (threshold < 65536) store<u32>(cells + (<usize>low << 2), threshold << 16 | high)
    const rest = load<f64>(weights + (<usize>high << 3)) - (1 - share)
    store<f64>(weights + (<usize>high << 3), rest)
    if (rest < 1) {
      largeCount--
      store<u32>(stack + (<usize>(smallCount++) << 2), high)
    }
  }
}

/** The outcome that a draw picks from a row of `count` cells. */
@inline
export function pickFromRow(cells: usize, count: u32, draw: u32): u32 {
  const product = <u64>draw * <u64>count
  const own = <u32>(product >> 32)
  const cell = load<u32>(cells + (<usize>own << 2))
  return (<u32>product >> 16) < (cell >> 16) ? own : cell & 0xFFFF
}

/** Cells of one base-256 digit. */
export const DIGIT_CELLS: i32 = 256

/*
 * k with P(k) ∝ x^k: its base-256 digits are independent, the lowest with weights x^d, the next with (x^256)^d, and so on.
 * Three digits tell numbers below 255·65536 apart; what lies beyond is past the end of every run that is sampled here.
 */
/** Fills rows of `digits` digits of a geometric law with ratio below 1; scratch holds 256 f64 and 512 u32. */
export function geometricRows(ratio: f64, digits: i32, cells: usize, scratch: usize): void {
  let x = ratio
  for (let digit = 0; digit < digits; digit++) {
    let weight: f64 = 1
    let total: f64 = 0
    for (let d = 0; d < DIGIT_CELLS; d++) {
      // The top digit's last cell stands for all that is larger.
      if (d == DIGIT_CELLS - 1 && digit == digits - 1) weight /= 1 - x
      store<f64>(scratch + (<usize>d << 3), weight)
      total += weight
      weight *= x
    }
    aliasRow(scratch, DIGIT_CELLS, total, cells + (<usize>digit << 10), scratch + 2048)
    for (let i = 0; i < 8; i++) x *= x
  }
}
