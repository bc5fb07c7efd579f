/** What a weigh-up says in words: verdict, changes, noise, spread, notes. */
import { capital } from '../../schemas/text'
import type { WeighCandidate, WeighUp, WeighUpParameter, WeighVerdict } from '../../schemas/weigh-up'
import { EXPLANATION_NAMES, SPOKEN_AS_MANY, type Explanation } from './explanations'
import { placeName } from './joint-problem'
import { AHEAD, AHEAD_OF_ONE_KIND } from './verdict'
import type { WeighInput, Weighing } from './weigh-up'

/** Names in a row: “a, b and c”. */
export const listed = (names: readonly string[]): string => names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${names[names.length - 1]!}`
const plural = (explanation: Explanation) => SPOKEN_AS_MANY.has(explanation)

/** A number with three digits that mean something; large ones whole. @param value - any [any] */
export function figure(value: number): string {
  const size = Math.abs(value)
  if (size >= 1000) return Math.round(value).toLocaleString('en').replaceAll(',', '\u202f')
  return size >= 100 ? value.toFixed(0) : size >= 10 ? value.toFixed(1) : size === 0 ? '0' : size < 1e-3 ? value.toExponential(1) : value.toPrecision(3)
}
/** χ² and distances: one digit below a hundred. @param value - [1] */
const chi = (value: number): string => Math.abs(value) < 100 ? value.toFixed(1) : figure(value)

const unitOf = ({ unit }: WeighUpParameter) => unit === '1/s' ? '\u00a0/s' : unit === 's' ? '\u00a0s' : ''

/** A value with its 95 % interval. */
export function valueText(one: WeighUpParameter): string {
  const interval = one.method === 'none' ? '' : one.low === null && one.high === null ? ' (interval open)' : one.low === null ? ` (below ${figure(one.high!)})` : one.high === null ? ` (above ${figure(one.low)})` : ` (${figure(one.low)} to ${figure(one.high)})`
  return `${figure(one.value)}${unitOf(one)}${interval}`
}

function conditionsText({ plain }: Weighing): string {
  const names = plain.conditions.map(one => one.condition)
  return names.length === 1 ? names[0]! : names.length <= 3 ? `${listed(names)} together` : `all ${['four', 'five', 'six', 'seven', 'eight'][names.length - 4] ?? names.length} conditions together`
}

function sentenceOf(weighing: Weighing): string {
  const { judgement } = weighing, { rule, ranked, margin } = judgement, best = ranked[0]!, what = conditionsText(weighing), next = ranked[1]
  if (rule === 'suffices') return `One exponential suffices for ${what}: no richer explanation gains enough to be needed. Two kinds of vesicle with ample supply give the same curve. The other explanations are not excluded.`
  if (rule === 'none-acceptable') return `No explanation fits ${what} acceptably: the best, ${EXPLANATION_NAMES[best.explanation]}, has χ² ${chi(best.found.chi2)} for ${best.dof} degrees of freedom (p below 0.001).`
  const behind = next ? ` The next, ${EXPLANATION_NAMES[next.explanation]}, stands ${chi(margin)} behind; ${next.explanation === 'one-kind' ? AHEAD_OF_ONE_KIND : AHEAD} is needed.` : ''
  if (rule === 'ahead') return `${capital(EXPLANATION_NAMES[best.explanation])} ${plural(best.explanation) ? 'explain' : 'explains'} ${what} best.${behind}`
  const names = judgement.within.map(one => EXPLANATION_NAMES[one])
  if (rule === 'cells-differ') return `Cannot tell from means alone: cells differ so much that their means go together, and then a curve ahead proves little. ${capital(EXPLANATION_NAMES[best.explanation])} ${plural(best.explanation) ? 'lead' : 'leads'} on ${what}; weigh the cells themselves.`
  const within = ranked.filter(one => judgement.within.includes(one.explanation)), numbers = within.map(one => chi(one.found.chi2)).join(', '), dofs = [...new Set(within.map(one => one.dof))]
  return `Cannot tell: ${listed(names)} explain ${what} about equally well (χ² ${numbers} for ${dofs.length === 1 ? dofs[0] : within.map(one => one.dof).join(', ')} degrees of freedom).`
}

function changeSentence(name: WeighVerdict['changes'][number], lead: WeighCandidate): string {
  const change = lead.changes.find(one => one.manipulation === name.manipulation)!, to = change.to === null ? null : lead.parameters[change.to]!, from = change.from === null ? null : lead.parameters[change.from]!
  if (!to) return ''
  const label = to.label.toLowerCase(), moved = from ? `${to.value < from.value ? 'lowers' : 'raises'} the ${label} from ${valueText(from)} to ${valueText(to)}` : `sets the ${label} to ${valueText(to)}`
  if (name.named) return `${name.manipulation} ${moved}.`
  const labels = name.alternatives.map(({ parameter, behind }) => `${parameterLabel(lead, parameter)} (${behind < 0.05 ? 'equal' : `${chi(behind)} behind`})`)
  return `${name.manipulation} ${moved}, or it changes the ${listed(labels)}: these cannot be told apart.`
}
const parameterLabel = (lead: WeighCandidate, name: string) => (lead.parameters.find(one => one.name === name)?.label ?? name).toLowerCase()

/** The verdict of the document. */
export function verdictOf(weighing: Weighing, candidates: readonly WeighCandidate[]): WeighVerdict {
  const { judgement } = weighing, { kind, rule, explanation, margin, within, scale, ranked } = judgement, next = ranked[1]?.explanation
  const model = ranked.find(one => one.explanation === explanation)?.found.model, lead = candidates.find(one => one.best && one.explanation === explanation)
  const changes = judgement.changes.map(one => ({
    manipulation: one.manipulation, parameter: placeName(model!, one.place), named: one.named, alternatives: one.alternatives.map(({ place, behind }) => ({ parameter: placeName(model!, place), behind })),
  }))
  return { kind, rule, explanation, changes, margin, needed: next === 'one-kind' ? AHEAD_OF_ONE_KIND : AHEAD, within, scale, sentence: sentenceOf(weighing), changeSentences: lead ? changes.map(one => changeSentence(one, lead)).filter(Boolean) : [] }
}

/** Where the errors come from. */
export function noiseOf({ plain, cells }: Weighing): WeighUp['noise'] {
  if (!cells) return { ...plain.noise, cells: null }
  const { sigma, kappa, delta, dof } = cells.variance
  return { kind: 'cells', pooledSd: plain.noise.pooledSd, cells: { sigma, kappa, delta, dof }, sentence: `Means are weighted by the covariance of their cells: scatter ${sigma.toFixed(4)} within a cell, rates that differ between cells by ${(100 * kappa).toFixed(1)} %, depletions by ${delta.toFixed(3)}.` }
}

/** What the SD between cells says of a spread of rates. */
export function spreadSentence({ judgement }: Weighing): WeighUp['spread'] {
  const { spread } = judgement
  if (!spread) return null
  const seen = `The variance seen between cells is ${figure(spread.q)} of what a spread of rates between cells would give.`
  const readings = {
    'inside-cells': 'It is excluded that each cell has one rate and cells differ so; the row then stands for rates that vary continuously over the sites of each cell.',
    'open': 'That decides nothing between a spread inside cells and one between them.',
    'between-cells': 'That is what cells that differ would show.',
  } as const
  return { ...spread, sentence: `${seen} ${readings[spread.reading]}` }
}

/** What was taken for granted while preparing. */
export function notesOf({ plain, judgement }: Weighing, { conditions, settings }: WeighInput): string[] {
  const notes: string[] = [], aside = plain.conditions.reduce((sum, one) => sum + one.aside, 0), lost = conditions.filter(one => !plain.conditions.some(kept => kept.condition === one.condition))
  if (aside > 0) notes.push(`${aside} ${aside === 1 ? 'point stays' : 'points stay'} out of the fits.`)
  if (lost.length > 0) notes.push(`No point counts in ${listed(lost.map(one => one.condition))}.`)
  if (plain.untouched !== 'none') notes.push(`No condition is marked untouched; “${plain.untouched}” is taken as the one that the others are held against.`)
  if (judgement.scale > 1) notes.push(`The best fit scatters more than the errors say; all χ² are divided by ${judgement.scale.toFixed(2)} before they are compared.`)
  for (const { protocol, value, source } of settings.typedDepletion) notes.push(`The depletion of “${protocol}” is ${value}, typed and not fitted; source: ${source}`)
  if (settings.resamples > 0 && conditions.some(one => one.cells.length === 0)) notes.push('Cells cannot be resampled: some conditions are given as means only.')
  return notes
}
