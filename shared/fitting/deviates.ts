/** Standard normal deviates from a seeded stream, for resampling. */
import { log } from './elementary'
import type { Stream } from '../walk/streams'

const UNIT = 2 ** -53
/** Uniform in (0, 1), from 53 bits: never 0, so that its logarithm is finite. */
const uniform = (stream: Stream): number => ((stream.next() >>> 5) * 67108864 + (stream.next() >>> 6) + 0.5) * UNIT

/** A point inside the unit circle, never its middle. */
function insideCircle(stream: Stream): [number, number] {
  for (;;) {
    const x = 2 * uniform(stream) - 1, y = 2 * uniform(stream) - 1, square = x * x + y * y
    if (square < 1 && square > 0) return [x, y]
  }
}

/**
 * Fills an array with standard normal deviates, in pairs, by the polar method (Marsaglia & Bray 1964, SIAM Rev 6:260): no sine and no cosine, whose
 * last bits differ between engines.
 * @param stream - where the random bits come from
 * @param into - is filled [1]
 */
export function normalDeviates(stream: Stream, into: Float64Array): void {
  for (let i = 0; i < into.length; i += 2) {
    const [x, y] = insideCircle(stream), square = x * x + y * y, factor = Math.sqrt(-2 * log(square) / square)
    into[i] = factor * x
    if (i + 1 < into.length) into[i + 1] = factor * y
  }
}
