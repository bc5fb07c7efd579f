/** What lists and the bench's home show of an outcome. */
import type { RunSummary } from '../db/schema'
import type { Outcome } from '../../shared/schemas/outcome'

/** Points of a curve the size of a thumb nail. */
const CURVE_POINTS = 60

export function summaryOf(outcome: Outcome): RunSummary {
  const { timesS, classes } = outcome
  const last = timesS.length - 1
  const points = Math.min(CURVE_POINTS, timesS.length)
  const curve = Array.from({ length: points }, (_, i): [number, number] => {
    const at = points === 1 ? last : Math.round(i * last / (points - 1))
    return [timesS[at]!, classes.reduce((sum, one) => sum + one.meanFilled[at]!, 0)]
  })
  return { ratio: outcome.ratio, verdict: outcome.agreement.verdict, classes: classes.map(({ name, tau }) => ({ name, tau })), curve }
}
