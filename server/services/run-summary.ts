/** What lists and the bench's home show of an outcome. */
import type { RunSummary } from '../db/schema'
import type { Outcome } from '../../shared/schemas/outcome'

/** Points of a curve the size of a thumb nail. */
const CURVE_POINTS = 60

/** Samples that a thumb nail shows: evenly spaced on a log axis, because half of a refill is over in a hundredth of the time that is watched. */
function thumbnailIndices(samples: number): number[] {
  const last = samples - 1
  if (last < 2) return Array.from({ length: samples }, (_, i) => i)
  return [...new Set([0, ...Array.from({ length: CURVE_POINTS - 1 }, (_, i) => Math.round(last ** (i / (CURVE_POINTS - 2))))])]
}

/** Its curve is the filled fraction of the sites against time [s]. */
export function summaryOf(outcome: Outcome): RunSummary {
  const { timesS, classes } = outcome
  const sites = classes.reduce((sum, one) => sum + one.sites, 0)
  const curve = thumbnailIndices(timesS.length).map((at): [number, number] => [timesS[at]!, classes.reduce((sum, one) => sum + one.meanFilled[at]!, 0) / sites])
  return { ratio: outcome.ratio, verdict: outcome.agreement.verdict, classes: classes.map(({ name, tau }) => ({ name, tau })), curve }
}
