/** Made recordings for tests of fits: exact curves, and curves with seeded noise. */
import { normalDeviates } from '../../../shared/fitting/deviates'
import { recoveryCurve, type NamedValue } from '../../../shared/fitting/recovery-model'
import type { RecoveryFit } from '../../../shared/fitting/fit'
import type { FitRefusal } from '../../../shared/fitting/point-errors'
import type { ConditionData } from '../../../shared/recordings/types'
import { seedWords, stateOf, Stream } from '../../../shared/walk/streams'
import { conditionOf } from '../../reference/recovery-data'

export const TIMES_S = [0.05, 0.1, 0.2, 0.4, 0.8, 1.6, 3.2, 6.4, 12.8, 25.6, 51.2]

export const streamOf = (seed: string): Stream => {
  const [low, high] = seedWords(seed)
  return new Stream(stateOf(low, high, 0))
}

/** A curve with a SEM and, where a stream is given, noise of that size. */
export function made(values: readonly NamedValue[], sem: number, stream?: Stream, names: Partial<ConditionData> = {}, times = TIMES_S): ConditionData {
  const deviates = new Float64Array(times.length)
  if (stream) normalDeviates(stream, deviates)
  return conditionOf(times, recoveryCurve(values, times).map((ratio, i) => ratio + sem * deviates[i]!), { sem, n: 9, sd: sem * 3 }, names)
}

export function accepted<T extends object>(found: T | FitRefusal): T {
  if ('refused' in found) throw new Error(`refused: ${found.refused.message}`)
  return found
}
export const refusedOf = (found: object | FitRefusal): string | null => 'refused' in found ? found.refused.code : null
export const valueOf = (fit: RecoveryFit, name: string, group: string | null = null): number => fit.parameters.find(one => one.name === name && one.group === group)!.value
export const codesOf = (fit: RecoveryFit): string[] => fit.warnings.map(one => one.code)
