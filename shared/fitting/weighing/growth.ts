/** How a verdict grew: the same weigh-up on the first untouched condition, with each of the others, and on all. */
import type { WeighGrowth } from '../../schemas/weigh-up'
import { EXPLANATIONS } from './explanations'
import { weighQuickly, type WeighInput } from './weigh-up'

const indexOfFirst = ({ conditions }: WeighInput) => Math.max(0, conditions.findIndex(one => one.manipulation === 'none'))

/** Places of the conditions of each step; the same set is not weighed twice. */
function stepsOf(input: WeighInput): number[][] {
  const first = indexOfFirst(input), others = input.conditions.map((_, i) => i).filter(i => i !== first), all = input.conditions.map((_, i) => i)
  return [[first], ...others.map(i => [first, i]), ...others.length > 1 ? [all] : []]
}

/**
 * Weighs parts of the data, one after another; the SD stays pooled over all of them.
 * @param input - as for the weigh-up
 * @returns one row per step that can be weighed; yields after each
 */
export function* growthSteps(input: WeighInput): Generator<number, WeighGrowth> {
  const rows: WeighGrowth = [], pool = input.pool ?? input.conditions
  for (const places of stepsOf(input)) {
    const found = weighQuickly({ ...input, pool, conditions: places.map(i => input.conditions[i]!) })
    if (!('refused' in found)) {
      const { ranked, kind, explanation, within } = found.judgement, of = new Map(ranked.map(one => [one.explanation, one]))
      rows.push({ conditions: places, kind, explanation, within, chi2: EXPLANATIONS.flatMap(one => of.has(one) ? [{ explanation: one, chi2: of.get(one)!.found.chi2, dof: of.get(one)!.dof }] : []) })
    }
    yield rows.length
  }
  return rows
}
