/** Invented cells of a known truth, with the noise of a bench: what calibrations and plans draw from. */
import { log } from '../elementary'
import { meansOfCells } from '../../recordings/conditions'
import type { CellPoint, ConditionData } from '../../recordings/types'
import type { Stream } from '../../walk/streams'
import { normalDeviates } from '../deviates'
import { MODELS, type Explanation } from './explanations'

export interface CellNoiseModel {
  /** SD of the logarithm of all rates between cells, and of the depletion [1]. */
  rateSd: number
  depletionSd: number
  /** Sites of a cell [count]. */
  sites: number
  /** SD of a measured ratio [1], and the part of ratios that is lost [1]. */
  measurementSd: number
  lost: number
}
/** As the invented bench has it. */
export const BENCH_NOISE: CellNoiseModel = { rateSd: 0.08, depletionSd: 0.02, sites: 576, measurementSd: 0.025, lost: 0.05 }

export interface SimulatedCondition {
  condition: string
  protocol: string
  manipulation: string
  explanation: Explanation
  /** In own units, in the order of the model's parameters. */
  parameters: readonly number[]
  depletion: number
  cells: number
  /** A spread between cells: each has one rate. */
  betweenCells?: boolean
}

const DEPLETION_RANGE = [0.2, 0.97] as const

/** One cell's curve: its rates all scaled by one factor; of a spread between cells its one rate. */
function cellCurve(plan: SimulatedCondition, timesS: Float64Array, depletion: number, rateDeviate: number, noise: CellNoiseModel): Float64Array {
  const ratio = new Float64Array(timesS.length)
  if (plan.betweenCells) {
    const [median, variance] = plan.parameters as [number, number]
    MODELS['one-kind'].curve(Float64Array.of(log(median) + Math.sqrt(variance) * rateDeviate, depletion), timesS, ratio, null)
    return ratio
  }
  const model = MODELS[plan.explanation], shift = noise.rateSd * rateDeviate
  const at = Float64Array.from([...plan.parameters.map((value, i) => model.parameters[i]!.log ? log(value) + (model.parameters[i]!.unit === '1/s' ? shift : 0) : value), depletion])
  model.curve(at, timesS, ratio, null)
  return ratio
}

/**
 * Draws the cells of one condition. Site noise is normal with the binomial's variance R(1 − R)/sites; ratios are rounded to 0.001.
 * @param plan - truth and number of cells
 * @param timesS - intervals, rising [s]
 * @param stream - seeded
 * @param noise - of the bench
 * @returns the condition with cells and their means
 */
export function simulateCondition(plan: SimulatedCondition, timesS: Float64Array, stream: Stream, noise: CellNoiseModel = BENCH_NOISE): ConditionData {
  const cells: CellPoint[] = [], deviates = new Float64Array(2 + 2 * timesS.length)
  for (let c = 0; c < plan.cells; c++) {
    normalDeviates(stream, deviates)
    const depletion = Math.min(DEPLETION_RANGE[1], Math.max(DEPLETION_RANGE[0], plan.depletion + noise.depletionSd * deviates[0]!))
    const curve = cellCurve(plan, timesS, depletion, deviates[1]!, noise)
    timesS.forEach((timeS, i) => {
      const sd = Math.sqrt(Math.max(0, curve[i]! * (1 - curve[i]!)) / noise.sites), measured = curve[i]! + sd * deviates[2 + 2 * i]! + noise.measurementSd * deviates[3 + 2 * i]!
      cells.push({ cell: `C${c + 1}`, intervalMs: timeS * 1000, ratio: stream.chance(noise.lost) ? null : Math.round(measured * 1000) / 1000, first: null, aside: null, line: null })
    })
  }
  return { condition: plan.condition, protocol: plan.protocol, manipulation: plan.manipulation, points: meansOfCells(cells), cells }
}
