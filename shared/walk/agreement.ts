/** Does the walk agree with the closed form? By an interval against a margin; the test of exact equality stands apart. */
import type { Outcome } from '../schemas/outcome'
import type { OutcomeFrame } from './frame'
import { twoSidedTail } from './normal'
import { sumOf, type Tallies } from './tallies'

export type Verdict = Outcome['agreement']['verdict']
export type Reason = Outcome['agreement']['reason']
type Maybe = Outcome['ratio']

export const DEFAULT_MARGIN_PERCENT = 5
/** Fewer attachments than this decide nothing: the interval itself is then a guess. */
const FEW_EVENTS = 10
/** Share of the pool used up from which a slow refill is laid to the finite pool. */
const POOL_USED = 0.1
/** Chance per step from which the curve (1 − p)ⁿ is visibly ahead of its exponential. */
const COARSE_STEP = 0.05

/**
 * Verdict by the interval: inside the margin agrees, wholly above slower, wholly below faster, else undecided.
 * @param ratio - walk over closed form with its interval; an open bound is null [1]
 * @param marginPercent - margin around 1 [%]
 * @returns the verdict
 */
export function verdictOf(ratio: Maybe, marginPercent = DEFAULT_MARGIN_PERCENT): Verdict {
  const margin = marginPercent / 100, { low, high } = ratio
  if (low !== null && low > 1 + margin) return 'slower'
  if (high !== null && high < 1 - margin) return 'faster'
  return low !== null && high !== null && low >= 1 - margin && high <= 1 + margin ? 'agrees' : 'undecided'
}

/**
 * Replicates in all that would decide with a chance of about 80 %: the half width must shrink to the distance from the nearer edge of the margin, less what the value itself may still move (1.96 + 0.84 standard errors).
 * @param ratio - with its interval [1]
 * @param replicates - walked so far [1]
 * @param marginPercent - margin [%]
 * @returns the number to two figures; null when no interval tells [1]
 */
export function replicatesToDecide(ratio: Maybe, replicates: number, marginPercent = DEFAULT_MARGIN_PERCENT): number | null {
  const { value, low, high } = ratio
  if (value === null || low === null || high === null || !(high > low)) return null
  const standardError = (high - low) / 2 / 1.96
  const edge = Math.min(Math.abs(value - (1 + marginPercent / 100)), Math.abs(value - (1 - marginPercent / 100)))
  // An edge closer than a tenth of the standard error says nothing about how far there is to go.
  const needed = replicates * (2.8 * standardError / Math.max(edge, standardError / 10)) ** 2
  const unit = 10 ** Math.max(0, Math.floor(Math.log10(needed)) - 1)
  return Math.max(replicates + 1, Math.ceil(needed / unit) * unit)
}

/** Share of the vesicles that can attach which a replicate uses up on average, each kind weighted with its part in the closed form's rate. */
function poolUsed(frame: OutcomeFrame, netAttached: number): number {
  const rates = frame.vesicles.map(vesicle => (vesicle.number ?? 0) * vesicle.mobilityFactor * vesicle.attachFactor)
  const all = rates.reduce((sum, rate) => sum + rate, 0)
  if (!(all > 0)) return 0
  return rates.reduce((used, rate, i) => used + (rate > 0 ? rate / all * Math.min(1, netAttached * rate / all / frame.vesicles[i]!.number!) : 0), 0)
}

/**
 * Why the walk is slower or faster than the closed form. Crowding is never a reason for slower.
 * @param frame - compiled scenario
 * @param verdict - of the whole ribbon
 * @param run - attachments in all [count], and the mean vesicles a replicate took from the pool for good [count]
 * @returns a word that the page turns into a sentence
 */
export function reasonOf(frame: OutcomeFrame, verdict: Verdict, run: { replicates: number, seen: number, netAttached: number }): Reason {
  if (verdict === 'undecided') return run.replicates < 2 || run.seen < FEW_EVENTS ? 'too-few' : 'none'
  const coarse = Math.max(...frame.attachProbability.flat()) * frame.occupancy / 6 > COARSE_STEP
  if (verdict === 'agrees') return frame.supply === 'stirred' && coarse ? 'discrete-step' : 'none'
  if (frame.supply === 'stirred') return 'none'
  if (verdict === 'slower') return frame.supply === 'sealed' && poolUsed(frame, run.netAttached) > POOL_USED ? 'finite-pool' : 'own-neighbourhood'
  if (frame.crowding === 'exclusive') return 'exclusion'
  return frame.detachPerStep.some(chance => chance > 0) ? 'own-neighbourhood' : 'none'
}

/**
 * Test of exact equality. Under the discrete law each empty site attaches in each step with probability p, so that attachments less Σ p·exposure is a martingale with variance Σ p(1 − p)·exposure.
 * It is the same test on every supply: on a stirred one the law holds and the test is exact; on a held or sealed one it asks whether the whole walk could be the closed form, the independence of sites included.
 * Under decline the mean factor stands for the factor in the (1 − p), which makes the variance a little large and the test a little shy.
 * @param tallies - of the run
 * @returns standard normal statistic, above 0 when more attached than expected (faster), and its two-sided p; nulls when nothing was expected [1]
 */
export function exactLawTest(tallies: Tallies): { statistic: number | null, pValue: number | null } {
  let surplus = 0, variance = 0
  tallies.chances.forEach((chance, j) => {
    const exposure = sumOf(tallies.exposureSteps[j]), driven = sumOf(tallies.drivenSteps[j])
    surplus += sumOf(tallies.events[j]) - chance * driven
    if (exposure > 0) variance += chance * driven * (1 - chance * driven / exposure)
  })
  if (!(variance > 0)) return { statistic: null, pValue: null }
  const statistic = surplus / Math.sqrt(variance)
  return { statistic, pValue: twoSidedTail(statistic) }
}
