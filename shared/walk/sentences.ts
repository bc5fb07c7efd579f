/** An outcome in plain words, as text: finding with its interval, then the reason. For the command line and for files; pages set the same facts in type. */
import type { Outcome, OutcomeClass } from '../schemas/outcome'
import { formatInterval, formatNumber, formatTime } from '../units'

type Found = Outcome['ratio']
const NO_BREAK = '\u00A0'

/** One more digit where the interval touches the margin, so that one sees on which side it lies. */
const bounds = (found: Found, name = '95 % interval '): string =>
  found.low === null || found.high === null ? '(no interval)' : `(${name}${formatInterval(found.low, found.high)})`

/** A time with its interval in one unit; the unit suits whatever is larger, the value or the interval. */
function timeText(found: Found): string {
  if (found.value === null) return '–'
  const largest = Math.max(Math.abs(found.value), Math.abs(found.high ?? 0), Math.abs(found.low ?? 0))
  const [scale, unit] = largest >= 1 ? [1, 's'] : [1000, 'ms']
  const value = `${formatNumber(found.value * scale)}${NO_BREAK}${unit}`
  return found.low === null || found.high === null ? `${value} (no interval)` : `${value} (${formatInterval(found.low * scale, found.high * scale)})`
}

/** Why, as the end of the verdict's sentence. */
export function reasonText(outcome: Outcome): string {
  const { reason, verdict } = outcome.agreement
  switch (reason) {
    case 'own-neighbourhood': return verdict === 'faster' ? ', because vesicles that let go stay near the ribbon and attach again' : ', because the ribbon empties its own neighbourhood'
    case 'finite-pool': return ', because the vesicles of the terminal are used up'
    case 'exclusion': return ', because vesicles that keep each other apart arrive more evenly'
    case 'discrete-step': return '; its curve runs a little ahead of the exponential, because the chance per step is large'
    case 'none': case 'too-few': return ''
  }
}

function undecidedText({ ratio, agreement, replicates }: Outcome): string {
  if (ratio.value === null) return 'Undecided: no vesicle attached in the time that was walked.'
  if (replicates < 2) return `Undecided: ratio ${formatNumber(ratio.value)} from a single replicate; an interval needs at least two.`
  if (ratio.low === null || ratio.high === null || agreement.reason === 'too-few') return `Undecided: ratio ${formatNumber(ratio.value)} ${bounds(ratio)}; too few vesicles attached to decide.`
  const { replicatesToDecide, marginPercent } = agreement
  const more = replicatesToDecide === null ? '' : `; ${formatNumber(replicatesToDecide - replicates, { significant: 2 })} replicates more would probably decide`
  return `Undecided: ${formatNumber(ratio.value, { significant: 4 })} ${bounds(ratio, '')} touches the margin of ${marginPercent}${NO_BREAK}%${more}.`
}

/**
 * The verdict as a sentence.
 * @param outcome - a finished or partial outcome
 * @returns one sentence with ratio and interval [1]
 */
export function verdictText(outcome: Outcome): string {
  const { ratio, agreement } = outcome
  if (agreement.verdict === 'undecided' || ratio.value === null) return undecidedText(outcome)
  if (agreement.verdict === 'agrees') return `The walk agrees with the closed form within ±${agreement.marginPercent}${NO_BREAK}%: ratio ${formatNumber(ratio.value)} ${bounds(ratio, '')}${reasonText(outcome)}.`
  return `Refill takes ${formatNumber(ratio.value)} times as long as the closed form says ${bounds(ratio)}${reasonText(outcome)}.`
}

/** τ of one kind of site, with its interval. */
export function kindText(kind: OutcomeClass): string {
  const { valueS, lowS, highS } = kind.tau
  const who = `The ${kind.sites} ${kind.name} ${kind.sites === 1 ? 'site' : 'sites'}`
  if (kind.sites === 0) return `No site is ${kind.name}: the share rounds away.`
  if (valueS === null) return kind.exposureS > 0 ? `${who} did not refill in the time that was walked.` : `${who} stood filled all along.`
  const formula = kind.closedFormTauS === null ? '' : `; the closed form says ${formatTime(kind.closedFormTauS)}`
  return `${who} refill${kind.sites === 1 ? 's' : ''} with τ ${timeText({ value: valueS, low: lowS, high: highS })}${formula}.`
}

/** How much is still empty when the walk ends. */
export function unfilledText(outcome: Outcome): string {
  const end = formatTime(outcome.timesS[outcome.timesS.length - 1] ?? 0), { unfilledShare } = outcome.tau
  return unfilledShare === 0 ? `At ${end} every site is filled.` : `At ${end}, ${formatNumber(unfilledShare * 100, { significant: 2 })}${NO_BREAK}% of the sites are empty.`
}

/** The test of exact equality, which stands apart from the verdict. */
export function exactTestText({ agreement: { pValue } }: Outcome): string {
  if (pValue === null) return 'Exact equality cannot be tested: no attachment was to be expected.'
  const text = pValue < 1e-6 ? 'p < 10⁻⁶' : `p = ${formatNumber(pValue, { significant: 2 })}`
  return `Test of exact equality with the discrete law: ${text}.`
}

/** The three parts of τ, share-weighted; empty when one of them is not defined. */
export function partsText({ decomposition: { collisionS, failedHitsS, depletionS } }: Outcome): string {
  if (collisionS === null || failedHitsS === null || depletionS.value === null) return ''
  return `τ has three parts: waiting for a hit ${formatTime(collisionS)}, hits that fail ${formatTime(failedHitsS)}, and what the walk adds ${timeText(depletionS)}.`
}
