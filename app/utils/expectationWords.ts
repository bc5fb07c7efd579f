/** The editor's sentences: what to expect by the closed form, against the saved revision, and what the preview walk adds. */
import type { ClosedForm } from '#shared/kinetics/closed-form'
import type { Outcome } from '#shared/schemas/outcome'
import type { Scenario } from '#shared/schemas/scenario'
import { formatInterval, formatTime } from '#shared/units'
import type { SentencePart } from './sentenceParts'

const tauWords = (tauS: number | null) => tauS === null ? 'never' : formatTime(tauS)
const CHANGED_FROM = 0.005

/** Factor between two time constants in words: “doubles”, “takes 1.30 times as long”, “halves”. */
function factorWords(factor: number): string {
  if (Math.abs(factor - 2) < 0.01) return 'double'
  if (Math.abs(factor - 0.5) < 0.0025) return 'halve'
  return factor > 1 ? `lengthen ${factor.toFixed(2)} times` : `shorten to ${factor.toFixed(2)} of it`
}

/** The sentence on top: a change against the saved revision where there is one, otherwise the time constants. */
export function expectationSentence(now: ClosedForm, saved: ClosedForm | null, savedName: string): SentencePart[] {
  const moved = now.classes.map((kind, i) => ({ kind, before: saved?.classes[i] }))
    .find(({ kind, before }) => before?.tauS && kind.tauS && Math.abs(kind.tauS / before.tauS - 1) > CHANGED_FROM)
  if (moved?.before?.tauS && moved.kind.tauS) {
    const whose = now.classes.length > 1 ? `of the ${moved.kind.name} sites` : 'of refill'
    return [
      { text: `The time constant ${whose} should ` }, { text: factorWords(moved.kind.tauS / moved.before.tauS), strong: true },
      { text: ` against ${savedName}: ${tauWords(moved.before.tauS)} to ${tauWords(moved.kind.tauS)} by the closed form.` },
    ]
  }
  const [first, second] = now.classes
  if (!first || now.classes.every(kind => kind.tauS === null)) return [{ text: 'By the closed form no site ever refills', strong: true }, { text: ': no vesicle can attach.' }]
  if (!second) return [{ text: 'By the closed form refill takes ' }, { text: `τ ${tauWords(first.tauS)}`, strong: true }, { text: '.' }]
  return [
    { text: `By the closed form the ${first.name} sites refill with ` }, { text: `τ ${tauWords(first.tauS)}`, strong: true },
    { text: `, the ${second.name} ones with ` }, { text: `τ ${tauWords(second.tauS)}`, strong: true }, { text: '.' },
  ]
}

const SUPPLY_WORDS: Record<Scenario['reservoir']['supply'], string> = {
  stirred: 'With stirred supply', held: 'With held supply', sealed: 'In the sealed terminal',
}
/** What the preview walk reads for the first kind of site, with its interval and its reason. */
export function previewSentence(scenario: Scenario, outcome: Outcome): SentencePart[] {
  const kind = outcome.classes.find(one => one.tau.valueS !== null)
  if (!kind?.tau.valueS) return [{ text: 'In the preview walk no site filled within the duration.' }]
  const { valueS, lowS, highS } = kind.tau
  const interval = lowS !== null && highS !== null ? ` (${formatInterval(lowS, highS)} s)` : ''
  const whose = outcome.classes.length > 1 ? ` for the ${kind.name} sites` : ''
  const { ratio, agreement } = outcome
  const percents = [ratio.value, ratio.low, ratio.high].map(one => Math.round(((one ?? 1) - 1) * (agreement.verdict === 'faster' ? -100 : 100)))
  const [gap, ...ends] = percents as [number, number, number]
  const [least, most] = ends.sort((a, b) => a - b)
  const reasons: Record<string, string> = {
    'own-neighbourhood': 'the ribbon empties its own neighbourhood', 'finite-pool': 'the store is being used up',
    'exclusion': 'vesicles keep each other apart', 'discrete-step': 'one step fills more than the formula’s exponential',
  }
  const reason = reasons[agreement.reason]
  const verdict = agreement.verdict === 'slower' || agreement.verdict === 'faster'
    ? `, ${gap} % (95 % interval ${least} to ${most} %) ${agreement.verdict} in all than the closed form${reason ? `: ${reason}` : ''}.`
    : agreement.verdict === 'agrees' ? ', in agreement with the closed form.' : '; too few replicates to tell it from the closed form.'
  return [{ text: `${SUPPLY_WORDS[scenario.reservoir.supply]} the preview walk reads τ ${formatTime(valueS)}` }, { text: interval, quiet: true }, { text: `${whose}${verdict}` }]
}

/** Caption of the expectation: which curve is which, and what the preview is. */
export function expectationCaption(scenario: Scenario, preview: Outcome | null, savedName: string, state: string, reason: string): string {
  const supply = { stirred: 'stirred', held: 'held', sealed: 'sealed' }[scenario.reservoir.supply]
  const walk = preview
    ? `Solid: ${preview.replicates} replicates of the walk with ${supply} supply, fixed seed “${preview.seed}”, engine ${preview.engine.algorithm} ${preview.engine.version}.`
    : state === 'too-large' ? `No preview walk: ${reason}` : state === 'failed' ? 'The preview walk stopped with a fault; the closed form stands.' : 'The preview walk is under way.'
  return `Redrawn at every change. Dashed: closed form, supply stirred. ${walk}${savedName ? ` Thin: the closed form of ${savedName}.` : ''}`
}
