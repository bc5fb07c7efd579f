/** Standard normal deviates from a seeded stream, for resampling. */
import type { Stream } from '../walk/streams'

const UNIT = 2 ** -53
/** Uniform in (0, 1), from 53 bits: never 0, so that its logarithm is finite. */
const uniform = (stream: Stream): number => ((stream.next() >>> 5) * 67108864 + (stream.next() >>> 6) + 0.5) * UNIT

/**
 * Fills an array with standard normal deviates, in pairs (Box & Muller 1958, Ann Math Stat 29:610).
 * @param stream - where the random bits come from
 * @param into - is filled [1]
 */
export function normalDeviates(stream: Stream, into: Float64Array): void {
  for (let i = 0; i < into.length; i += 2) {
    const radius = Math.sqrt(-2 * Math.log(uniform(stream))), angle = 2 * Math.PI * uniform(stream)
    into[i] = radius * Math.cos(angle)
    if (i + 1 < into.length) into[i + 1] = radius * Math.sin(angle)
  }
}
