/** Recovery data for outside checks. */
import type { ConditionData, SummaryPoint } from '../../shared/recordings/types'

/** A condition from its points; errors and n where they are given. */
export function conditionOf(timesS: readonly number[], ratios: readonly number[], more: Partial<Pick<SummaryPoint, 'sd' | 'sem' | 'n'>> = {}, names: Partial<ConditionData> = {}): ConditionData {
  const points = timesS.map((time, i) => ({ intervalMs: time * 1000, ratio: ratios[i]!, sd: null, sem: null, n: null, aside: null, line: null, ...more }))
  return { condition: 'control', protocol: 'step', manipulation: 'none', cells: [], points, ...names }
}

/** Invented: 0.6 at 0.8 s and 0.4 at 13 s, plus small fixed offsets. */
export const WORKED_TIMES_S = [0.1, 0.2, 0.4, 0.8, 1.6, 3.2, 6.4, 12.8, 25.6]
export const WORKED = conditionOf(WORKED_TIMES_S, [0.086, 0.130, 0.252, 0.392, 0.575, 0.670, 0.763, 0.846, 0.947])

/** Invented: the demo bench's control, means of 8 or 9 cells. */
export const CONTROL: ConditionData = {
  ...conditionOf([0.05, 0.1, 0.2, 0.4, 0.8, 1.6, 3.2, 6.4, 12.8, 25.6, 51.2], [0.150, 0.181, 0.243, 0.332, 0.459, 0.594, 0.685, 0.745, 0.799, 0.890, 0.945]),
}
const SDS = [0.023, 0.055, 0.029, 0.044, 0.040, 0.032, 0.037, 0.033, 0.037, 0.035, 0.027], SEMS = [0.008, 0.019, 0.010, 0.015, 0.013, 0.011, 0.012, 0.011, 0.013, 0.012, 0.009], NS = [9, 8, 9, 9, 9, 9, 9, 9, 8, 8, 9]
CONTROL.points.forEach((point, i) => Object.assign(point, { sd: SDS[i], sem: SEMS[i], n: NS[i] }))
