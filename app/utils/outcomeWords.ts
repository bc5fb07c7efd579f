/** The sentences of an outcome: finding first, interval, then the reason. */
import type { Outcome, OutcomeClass } from '#shared/schemas/outcome'
import { stepSeconds, type Scenario } from '#shared/schemas/scenario'
import { type NumberStyle, formatForField, formatInterval, formatNumber, formatQuantity, formatTime, formatWithError } from '#shared/units'
import { reasonText } from '#shared/walk/sentences'
import type { SentencePart } from './sentenceParts'

/** A number that a person typed, as typed; and a time span of the schedule. */
export const typedNumber = (value: number, style: NumberStyle = {}) => formatForField(Number(value.toPrecision(6)), style.decimal)
export const typedTime = (seconds: number, style: NumberStyle = {}) => `${typedNumber(seconds, style)}\u00A0s`
const ratioText = (value: number, style: NumberStyle) => formatNumber(value, { ...style, significant: value >= 10 ? 3 : value >= 1 ? 3 : 2 })

function interval(ratio: Outcome['ratio'], style: NumberStyle, name = '95\u00A0% interval '): string {
  return ratio.low === null || ratio.high === null ? '(no interval)' : `(${name}${formatInterval(ratio.low, ratio.high, style)})`
}

/** The word of state above the sentence: what it is, its colour class, and what it is measured by. */
export function verdictKind(outcome: Outcome): { word: string, tone: 'good' | 'caution' | '', rest: string } {
  const rest = `by a stated margin of ±${outcome.agreement.marginPercent} %`
  switch (outcome.agreement.verdict) {
    case 'agrees': return { word: 'Agrees with the closed form', tone: 'good', rest }
    case 'slower': return { word: 'Slower than the closed form', tone: 'caution', rest }
    case 'faster': return { word: 'Faster than the closed form', tone: 'caution', rest }
    default: return { word: 'Undecided', tone: '', rest }
  }
}

function undecided(outcome: Outcome, style: NumberStyle): SentencePart[] {
  const { ratio, agreement, replicates } = outcome
  if (ratio.value === null) return [{ text: 'No vesicle attached', strong: true }, { text: ' in the time watched, so the walk says nothing about the closed form.' }]
  if (ratio.low === null || ratio.high === null)
    return [{ text: `Walk over closed form ${ratioText(ratio.value, style)}`, strong: true }, { text: replicates === 1 ? ', from one replicate: it has no interval and decides nothing.' : ', without an interval: too few vesicles attached to decide.' }]
  const more = agreement.replicatesToDecide
  return [
    { text: 'Walk over closed form ' }, { text: ratioText(ratio.value, style), strong: true }, { text: ' ' }, { text: interval(ratio, style), quiet: true },
    { text: ` touches the margin of ${agreement.marginPercent} %${more === null ? '.' : `; ${formatNumber(more - replicates, { ...style, significant: 2 })} replicates more would probably decide.`}` },
  ]
}

/** The sentence on top of an outcome. */
export function verdictSentence(outcome: Outcome, style: NumberStyle = {}): SentencePart[] {
  const { ratio, agreement } = outcome
  if (agreement.verdict === 'undecided' || ratio.value === null) return undecided(outcome, style)
  const reason = reasonText(outcome)
  if (agreement.verdict === 'agrees') return [
    { text: 'The walk agrees with the closed form', strong: true }, { text: ` within ±${agreement.marginPercent} %: ratio ${ratioText(ratio.value, style)} ` }, { text: interval(ratio, style), quiet: true }, { text: `${reason}.` },
  ]
  return [
    { text: 'Refill takes ' }, { text: `${ratioText(ratio.value, style)} times`, strong: true }, { text: ' as long as the closed form says ' },
    { text: interval(ratio, style), quiet: true }, { text: `${reason}.` },
  ]
}

function tauWords(kind: OutcomeClass, style: NumberStyle): SentencePart[] {
  const { valueS, lowS, highS } = kind.tau
  if (valueS === null) return [{ text: 'did not fill' }]
  return [{ text: `refill with τ ${formatTime(valueS, style)}` }, ...(lowS !== null && highS !== null ? [{ text: ` (${formatInterval(lowS, highS, style)})`, quiet: true }] : [])]
}

/** The paragraph of numbers below it: each kind's τ, and what is still empty at the end. */
export function outcomeNumbers(outcome: Outcome, style: NumberStyle = {}): SentencePart[] {
  const present = outcome.classes.filter(kind => kind.sites > 0)
  const parts = present.flatMap((kind, i): SentencePart[] => [
    { text: i === 0 ? `The ${kind.sites} ${kind.name} site${kind.sites === 1 ? '' : 's'} ` : `, the ${kind.sites} ${kind.name} one${kind.sites === 1 ? '' : 's'} ` },
    ...(i === 0 ? tauWords(kind, style) : tauWords(kind, style).map(part => ({ ...part, text: part.text.replace('refill with', 'with') }))),
  ])
  const end = outcome.timesS.at(-1) ?? 0
  const empty = `${formatNumber(outcome.tau.unfilledShare * 100, { ...style, significant: 2 })} %`
  return [...parts, { text: `. At ${typedTime(Number(end.toPrecision(4)), style)}, ${outcome.tau.unfilledShare === 0 ? 'no site is empty' : `${empty} of the sites are still empty`}.` }]
}

/** Time left as people say it: seconds, from two minutes on minutes, from two hours on hours. */
export function leftWords(seconds: number): string {
  if (seconds < 120) return `${Math.max(1, Math.round(seconds))}\u00A0s`
  return seconds < 7200 ? `${Math.round(seconds / 60)}\u00A0min` : `${Math.round(seconds / 3600)}\u00A0h`
}

/** So far: the head of a run under way. */
export function soFarSentence(done: number, wanted: number, remainingMs: number | null, outcome: Outcome | null, style: NumberStyle = {}): SentencePart[] {
  const left = remainingMs === null ? '' : `, about ${leftWords(remainingMs / 1000)} left`
  const head: SentencePart[] = [{ text: `${formatQuantity(done, 'count')} of ${formatQuantity(wanted, 'count')}`, strong: true }, { text: ` replicates done${left}. ` }]
  if (!outcome || outcome.ratio.value === null) return [...head, { text: 'The first numbers come with the first replicates.' }]
  return [...head, { text: `So far the walk takes ${ratioText(outcome.ratio.value, style)} times as long as the closed form ` }, { text: interval(outcome.ratio, style, ''), quiet: true }, { text: '.' }]
}

function supplyWords({ reservoir }: Scenario): string {
  if (reservoir.supply === 'stirred') return 'the neighbourhood redrawn at every step'
  if (reservoir.supply === 'held') return `the boundary ${reservoir.marginSites} voxels from the ribbon kept at the resting density`
  return `a sealed terminal of ${reservoir.sizeUm.join(' × ')} µm`
}
function ribbonWords({ ribbon }: Scenario): string {
  if (ribbon.shape === 'isolated') return 'one site in the middle of a wide wall'
  const sites = `${ribbon.rows} × ${ribbon.columns} sites`
  return ribbon.faces === 2 ? `a plate of ${sites} on each of two faces` : `a plate of ${sites} on a wall`
}

/** One sentence for a methods section, with every number that a reader needs to walk it again. */
export function outcomeMethods(scenario: Scenario, outcome: Outcome, revision: number | null, style: NumberStyle = {}): string {
  const { medium, schedule, sites } = scenario
  const number = (value: number) => typedNumber(value, style)
  const kinds = outcome.classes.filter(kind => kind.sites > 0)
  const attach = kinds.map(kind => `${number(kind.attachProbability)} at ${kind.sites}${kinds.length > 1 ? ` ${kind.name}` : ''} sites`).join(' and ')
  const extra = [
    medium.crowding === 'exclusive' ? 'vesicles exclude each other' : 'vesicles pass each other freely', schedule.decline ? `attachment declining to ${number(schedule.decline.restFactor)} with ${formatTime(schedule.decline.timeConstantS, style)}` : '',
    sites.some(site => site.detachPerS > 0) ? 'sites that let go' : '', sites.some(site => site.readyPerS !== null) ? 'captured vesicles becoming ready' : '',
  ].filter(Boolean)
  const { ratio, agreement } = outcome
  const found = ratio.value === null ? '' : `walk over closed form ${ratioText(ratio.value, style)} ${interval(ratio, style, '')}, read against a margin of ±${agreement.marginPercent}\u00A0%; `
  return `Refill of ${ribbonWords(scenario)} was simulated with Moorage (engine ${outcome.engine.algorithm} ${outcome.engine.version}): vesicles of ${number(medium.spacingNm)} nm at ${number(medium.densityPerUm3)} per µm³ with D ${number(medium.diffusionUm2PerS)} µm²/s, `
    + `${supplyWords(scenario)}${extra.length > 0 ? `, ${extra.join(', ')}` : ''}; attachment per hit ${attach}; ${number(1 - schedule.initialFill)} of the sites emptied and watched for ${formatTime(schedule.durationS, style)}; `
    + `${outcome.replicates} replicates${outcome.partial ? ' (partial)' : ''}, seed ‘${outcome.seed}’, lattice step ${formatTime(stepSeconds(medium), style)}, scenario ${outcome.scenarioDigest.slice(0, 12)}${revision === null ? '' : ` (revision ${revision})`}, outcome ${outcome.digest.slice(0, 12)}; ${found}intervals are 95\u00A0%, from whole replicates.`
}

/** `p = 0.31` or `p < 10^−6`. */
export function pText(pValue: number | null, style: NumberStyle = {}): { sign: '=' | '<', text: string, power: number | null } | null {
  if (pValue === null) return null
  if (pValue >= 1e-3) return { sign: '=', text: formatNumber(pValue, { ...style, significant: 2 }), power: null }
  const power = Math.max(-300, Math.ceil(Math.log10(Math.max(pValue, 1e-300)) - 1e-9))
  return { sign: '<', text: '10', power }
}

/** Value with half its interval, or the value alone. */
export function withInterval(found: { value: number | null, low: number | null, high: number | null }, style: NumberStyle = {}): { value: string, error: string } {
  if (found.value === null) return { value: '–', error: '' }
  if (found.low === null || found.high === null) return { value: formatNumber(found.value, style), error: '' }
  const [value, error] = formatWithError(found.value, (found.high - found.low) / 2, style).split(' ± ')
  return { value: value!, error: error ? `± ${error}` : '' }
}

/** A digest to read aloud: first eight and last four, in groups of four. */
export const shortDigest = (digest: string) => `${digest.slice(0, 4)} ${digest.slice(4, 8)} … ${digest.slice(-4)}`
