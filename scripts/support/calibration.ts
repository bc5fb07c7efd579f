/** Truths and designs of the calibration, and one set of cells of each. */
import { MODELS, type Explanation } from '../../shared/fitting/weighing/explanations'
import { simulateCondition, type SimulatedCondition } from '../../shared/fitting/weighing/simulate-cells'
import type { ConditionData } from '../../shared/recordings/types'
import { seedWords, stateOf, Stream } from '../../shared/walk/streams'

export const TIMES_S = Float64Array.from({ length: 11 }, (_, i) => 0.05 * 2 ** i)
export const DESIGNS = ['control', 'control + short', 'control + A', 'control + B', 'four'] as const
export type Design = typeof DESIGNS[number]
const MEMBERS: Record<Design, readonly string[]> = { 'control': ['control'], 'control + short': ['control', 'short'], 'control + A': ['control', 'A'], 'control + B': ['control', 'B'], 'four': ['control', 'short', 'A', 'B'] }

export interface Truth { explanation: Explanation, settings: number[][], /** Place and factor of what A and B change. */ changes: Record<'A' | 'B', [place: number, factor: number]> }

export const TRUTHS: readonly Truth[] = [
  { explanation: 'site-kinds', settings: [[0.6, 1.2, 0.05], [0.5, 2.5, 0.1], [0.4, 0.8, 0.03]], changes: { A: [1, 1 / 4], B: [0, 1 / 3] } },
  { explanation: 'limited-store', settings: [[1.2, 0.05, 0.5], [0.8, 0.05, 0.4], [0.6, 0.02, 0.8]], changes: { A: [0, 1 / 4], B: [2, 1 / 3] } },
  { explanation: 'declining-drive', settings: [[1.5, 0.05, 0.8], [0.8, 0.1, 2], [1.2, 0.03, 1.5]], changes: { A: [0, 1 / 4], B: [2, 1 / 4] } },
  { explanation: 'one-kind', settings: [[0.08], [0.25], [1.2]], changes: { A: [0, 1 / 4], B: [0, 1 / 2] } },
  { explanation: 'two-step', settings: [[0.3, 2], [0.5, 1], [0.8, 5]], changes: { A: [0, 1 / 3], B: [1, 1 / 4] } },
  { explanation: 'spread', settings: [[0.3, 2.25], [0.3, 1.44], [0.5, 4]], changes: { A: [0, 1 / 4], B: [1, 1 / 4] } },
]

const DEPLETION = 0.88, SHORT_DEPLETION = 0.35
const CELLS = { control: 9, short: 9, A: 8, B: 8 } as const

/** A truth under its four conditions. */
export function plansOf({ explanation, settings, changes }: Truth, setting: number): SimulatedCondition[] {
  const parameters = settings[setting]!, changed = ([place, factor]: [number, number]) => parameters.map((value, i) => i === place ? value * factor : value)
  const one = (condition: keyof typeof CELLS, own: number[]): SimulatedCondition => ({
    condition, protocol: condition === 'short' ? 'short' : 'long', manipulation: condition === 'A' || condition === 'B' ? condition : 'none', explanation, parameters: own,
    depletion: condition === 'short' ? SHORT_DEPLETION : DEPLETION, cells: CELLS[condition],
  })
  return [one('control', parameters), one('short', parameters), one('A', changed(changes.A)), one('B', changed(changes.B))]
}

/** One drawn set of all four conditions. */
export function drawSet(truth: Truth, setting: number, set: number, seed: string): ConditionData[] {
  const [low, high] = seedWords(`${seed}/${truth.explanation}/${setting}`), stream = new Stream(stateOf(low, high, set))
  return plansOf(truth, setting).map(plan => simulateCondition(plan, TIMES_S, stream))
}

export const conditionsOf = (design: Design, set: readonly ConditionData[]): ConditionData[] => set.filter(one => MEMBERS[design].includes(one.condition))

/** True values of an explanation's parameters by name, in the control. */
export const truthValues = (truth: Truth, setting: number): Map<string, number> => new Map([...MODELS[truth.explanation].parameters.map(({ name }, i): [string, number] => [name, truth.settings[setting]![i]!]), ['depletion', DEPLETION]])
