/** What a weigh-up figure shows, in words and numbers: its text alternative, its table and its CSV. */
import { formatNumber } from '#shared/units'
import type { WeighCandidate, WeighUp } from '#shared/schemas/weigh-up'
import { csvOf } from './figureTable'
import { errorOf } from './weighAxes'
import { bestOf, criterionWord, nameInFigure } from './weighDrawing'

type Weighed = Pick<WeighUp, 'conditions' | 'candidates' | 'criterion'>
const counted = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`

/** Points of a candidate within two standard errors, and all [count]. */
function pointsWithin({ residuals }: WeighCandidate): [within: number, all: number] {
  const all = residuals.flat()
  return [all.filter(residual => Math.abs(residual) <= 2).length, all.length]
}

/** The text alternative: each explanation with its χ² and how many points it meets. */
export function weighSentence(weighUp: Weighed): string {
  const best = bestOf(weighUp.candidates), { conditions } = weighUp
  const unseen = conditions.flatMap(one => one.points).filter(({ timeS }) => !(timeS > 0)).length
  const each = best.map((one) => {
    const [within, all] = pointsWithin(one)
    return `${one.name}, ${criterionWord(one, weighUp.criterion)}, ${within} of ${counted(all, 'point', 'points')} within two standard errors`
  })
  return [
    `Second response over first against the interval in ${counted(conditions.length, 'condition', 'conditions')} (${conditions.map(one => one.condition).join(', ')}), with the best curve of ${counted(best.length, 'explanation', 'explanations')} and the deviation of each point: ${each.join('; ')}.`,
    ...(unseen ? [`A logarithmic axis has no 0: ${counted(unseen, 'point', 'points')} at interval 0 ${unseen === 1 ? 'stands' : 'stand'} in the table only.`] : []),
  ].join(' ')
}

/** One row a point: measured ratio, then each explanation's deviation in the unit of the strips. */
export function weighTable(weighUp: Weighed, inRatio: boolean): { head: { name: string, unit: string }[], rows: string[][] } {
  const best = bestOf(weighUp.candidates), maybe = (value: number | null, significant = 3) => value === null ? '–' : formatNumber(value, { significant })
  const head = [
    { name: 'Condition', unit: '' }, { name: 'Interval', unit: 's' }, { name: 'Ratio', unit: '' }, { name: 'Standard error', unit: '' }, { name: 'Cells', unit: '' },
    ...best.map(one => ({ name: nameInFigure(one.name), unit: inRatio ? 'measured − fitted' : 'standard errors' })),
  ]
  const rows = weighUp.conditions.flatMap((condition, c) => condition.points.map(({ timeS, ratio, error, n }, i) => [
    condition.condition, formatNumber(timeS), formatNumber(ratio), maybe(error, 2), n === null ? '–' : String(n),
    ...best.map((one) => {
      const residual = one.residuals[c]?.[i]
      return maybe(residual === undefined ? null : inRatio ? residual * errorOf(error, one) : residual, 2)
    }),
  ]))
  return { head, rows }
}

/** All that is drawn, one row a point and one row a place of the curves. */
export function weighCsv(weighUp: Weighed): string {
  const best = bestOf(weighUp.candidates)
  const head = ['row', 'condition', 'protocol', 'manipulation', 'interval_s', 'ratio', 'standard_error', 'sd_of_cells', 'cells', ...best.flatMap(one => [`${one.explanation}_fitted`, `${one.explanation}_deviation_in_standard_errors`])]
  const rows = weighUp.conditions.flatMap((one, c) => {
    const names = [one.condition, one.protocol, one.manipulation]
    const points = one.points.map(({ timeS, ratio, error, sd, n }, i) => ['point', ...names, timeS, ratio, error, sd, n, ...best.flatMap((candidate) => {
      const residual = candidate.residuals[c]?.[i] ?? null
      return [residual === null ? null : Number((ratio - residual * errorOf(error, candidate)).toPrecision(8)), residual]
    })])
    const curves = one.gridS.map((timeS, i) => ['curve', ...names, timeS, null, null, null, null, ...best.flatMap(candidate => [candidate.curves[c]?.[i] ?? null, null])])
    return [...points, ...curves]
  })
  return csvOf([head, ...rows])
}
