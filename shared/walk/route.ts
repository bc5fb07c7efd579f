/** Which algorithm walks a scenario. All are exact or nearly so; they differ in what they can walk and in cost. */
import type { Scenario } from '../schemas/scenario'
import { ATTEMPT_SITE_LIMIT, ATTEMPT_TABLE_LIMIT } from './attempt-size'
import { latticeSize, type LatticeSize } from './table-size'
import type { Algorithm, AskedAlgorithm } from './types'

/** No algorithm may hold larger tables, the lattice included. */
export const TABLE_LIMIT_BYTES = 256 * 2 ** 20

export type Route = { algorithm: Algorithm, refusal: null } | { algorithm: null, refusal: string }
const take = (algorithm: Algorithm): Route => ({ algorithm, refusal: null })
const refuse = (refusal: string): Route => ({ algorithm: null, refusal })

/** A size [bytes] in whole megabytes, at least 1, as a person reads it. */
export const megabytes = (bytes: number): string => `${Math.max(1, Math.round(bytes / 2 ** 20))} MB`

/**
 * Routes a scenario. A stirred supply has no lattice and one algorithm of its own, whatever was asked. Exclusion is walked step by step.
 * @param scenario - with defaults filled in
 * @param asked - `auto`, or an algorithm that a person wants
 * @param size - the scenario's size where it is known already
 * @returns the algorithm, or a sentence that says why the asked one cannot walk this scenario
 */
export function routeAlgorithm(scenario: Scenario, asked: AskedAlgorithm = 'auto', size?: LatticeSize): Route {
  if (scenario.reservoir.supply === 'stirred') return take('stirred')
  if (scenario.medium.crowding === 'exclusive')
    return asked === 'attempt' || asked === 'touch' ? refuse(`Exclusive crowding needs the step-by-step walk; “${asked}” samples independent vesicles.`) : take('step')
  if (asked === 'step') return take('step')
  const { sites, attemptBytes, touchBytes, latticeBytes } = size ?? latticeSize(scenario)
  const attemptFits = attemptBytes <= ATTEMPT_TABLE_LIMIT && attemptBytes + latticeBytes <= TABLE_LIMIT_BYTES
  const touchFits = touchBytes + latticeBytes <= TABLE_LIMIT_BYTES
  if (asked === 'attempt') {
    const needs = Number.isFinite(attemptBytes) ? ` and needs about ${megabytes(attemptBytes)}` : ''
    return attemptFits ? take('attempt') : refuse(`“attempt” walks up to ${ATTEMPT_SITE_LIMIT} sites and ${megabytes(ATTEMPT_TABLE_LIMIT)} of tables; this scenario has ${sites} sites${needs}.`)
  }
  if (asked === 'touch')
    return touchFits ? take('touch') : refuse(`“touch” holds up to ${megabytes(TABLE_LIMIT_BYTES)} of tables; this scenario needs about ${megabytes(touchBytes + latticeBytes)}. The step-by-step walk needs none.`)
  return take(attemptFits ? 'attempt' : touchFits ? 'touch' : 'step')
}
