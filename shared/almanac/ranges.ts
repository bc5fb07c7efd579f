/** The almanac's published ranges in one list, and how to find one. */
import { KINETICS } from './kinetics'
import { MANIPULATIONS } from './manipulations'
import { MOBILITY } from './mobility'
import type { PublishedRange } from './range'
import { STRUCTURE } from './structure'

export { KINETICS, MANIPULATIONS, MOBILITY, STRUCTURE }
export type { PublishedRange, SourceStatus } from './range'

export const PUBLISHED_RANGES: readonly PublishedRange[] = [...STRUCTURE, ...MOBILITY, ...KINETICS, ...MANIPULATIONS]

const byId = new Map(PUBLISHED_RANGES.map(range => [range.id, range]))

/**
 * A published range by its id.
 * @param id - such as `H-30`
 * @returns the range [its own unit]
 * @throws RangeError on an id that is not in the almanac
 */
export function publishedRange(id: string): PublishedRange {
  const found = byId.get(id)
  if (!found) throw new RangeError(`The almanac has no entry ${id}`)
  return found
}
