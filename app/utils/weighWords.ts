/** How a weigh-up is spoken of in lists and heads. */
import { EXPLANATION_NAMES } from '#shared/fitting/weighing/explanations'
import type { WeighUpRow } from '#shared/schemas/api/weigh-up'
import type { WeighCandidate, WeighUp } from '#shared/schemas/weigh-up'
import { capital } from '#shared/schemas/text'
import { formatNumber } from '#shared/units'

/** “prefers two kinds of site, by 207”, “cannot tell”. */
export function weighVerdict({ kind, explanation, margin, rule }: WeighUpRow['verdict']): { word: string, kind: string, rest: string } {
  if (kind === 'cannot-tell' || explanation === null) return { word: 'cannot tell', kind: 'caution', rest: '' }
  if (rule === 'suffices') return { word: 'one exponential suffices', kind: 'good', rest: '' }
  return { word: `prefers ${EXPLANATION_NAMES[explanation]}`, kind: 'good', rest: `, by ${formatNumber(margin, { significant: 3 })}` }
}
/** The line above the heading: what kind of verdict it is and by which margin. */
export function weighKind({ verdict }: WeighUp): { word: string, kind: string, rest: string } {
  if (verdict.kind === 'cannot-tell') return { word: 'Cannot tell', kind: 'caution', rest: ` between ${verdict.within.length || 'the'} explanations (${verdict.needed} apart needed)` }
  if (verdict.rule === 'suffices') return { word: 'One exponential suffices', kind: 'good', rest: '; the others are not excluded' }
  return { word: 'Prefers', kind: 'good', rest: ` ${verdict.explanation ? EXPLANATION_NAMES[verdict.explanation] : ''}, by ${formatNumber(verdict.margin, { significant: 3 })} against the runner-up (${verdict.needed} needed)` }
}
export const READINGS: Record<WeighCandidate['reading'], { word: string, kind: string }> = {
  'preferred': { word: 'preferred', kind: 'good' }, 'within': { word: 'cannot be told apart', kind: 'caution' }, 'behind': { word: 'behind', kind: 'q' },
  'excluded': { word: 'excluded', kind: '' }, 'other-change': { word: 'another change', kind: 'q' },
}
/** What a manipulation changes under a candidate: “quick rate 1.21 to 0.32”. */
export function weighChange(candidate: WeighCandidate, manipulation: string): string {
  const change = candidate.changes.find(one => one.manipulation === manipulation)
  if (!change) return 'nothing'
  const of = (place: number | null) => place === null ? null : candidate.parameters[place] ?? null
  const from = of(change.from), to = of(change.to)
  if (!to) return change.parameter
  const unit = to.unit === '1' ? '' : `\u00A0${to.unit === '1/s' ? '/s' : 's'}`
  return `${to.label.toLowerCase()}${from ? ` ${formatNumber(from.value)} to` : ''} ${formatNumber(to.value)}${unit}`
}
export const weighTitle = (conditions: readonly string[]) => capital(conditions.join(', ')).slice(0, 200)
