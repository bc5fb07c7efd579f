/** Doubts that stand beside every verdict, where they apply, in plain words. */
import { UNTOUCHED } from '../../recordings/types'
import type { WeighCandidate, WeighUp } from '../../schemas/weigh-up'
import { listed } from './sentences'
import type { WeighInput, Weighing } from './weigh-up'

type Doubt = WeighUp['doubts'][number]
const FEWEST_CELLS = 5
const FAR_OUT = 2
const STRONG = 0.95

function farPoints({ plain }: Weighing, lead: WeighCandidate): Doubt[] {
  const far = plain.conditions.flatMap((one, c) => lead.residuals[c]!.flatMap((residual, i) => Math.abs(residual) > FAR_OUT ? [`${one.condition} at ${Number(one.timesS[i]!.toPrecision(4))} s, ${Math.abs(residual).toFixed(1)} ${residual > 0 ? 'above' : 'below'}`] : []))
  return far.length === 0 ? [] : [{ code: 'far-points', sentence: `${far.length} of ${plain.points} points ${far.length === 1 ? 'lies' : 'lie'} beyond 2 standard errors of the best curve: ${far.slice(0, 6).join('; ')}${far.length > 6 ? '; and more' : ''}.` }]
}

function ofValues(lead: WeighCandidate): Doubt[] {
  const named = (i: number) => `${lead.parameters[i]!.label.toLowerCase()}${lead.parameters[i]!.manipulation ? ` under ${lead.parameters[i]!.manipulation}` : ''}`
  const unresolved = lead.parameters.flatMap((one, i) => one.unresolved ? [{ code: 'unresolved', sentence: `Not resolved by these intervals: ${named(i)}. ${one.unresolved}` }] : [])
  const tight = lead.correlations.filter(one => Math.abs(one.value) > STRONG)
  return [...unresolved, ...tight.map(one => ({ code: 'correlated', sentence: `${named(one.first)} and ${named(one.second)} can hardly be told apart (correlation ${one.value.toFixed(2)}).` }))]
}

function ofCells({ plain, cells, judgement }: Weighing, input: WeighInput): Doubt[] {
  const doubts: Doubt[] = [], given = input.conditions.every(one => one.cells.length > 0)
  const fewest = Math.min(...plain.conditions.map(one => Math.max(...[...one.n].filter(n => n > 0), 0))), few = fewest > 0 && fewest < FEWEST_CELLS
  if (!cells) doubts.push({ code: 'cells-not-given', sentence: `${given ? 'Cells are given and not used' : 'Cells are not given'}: points of one cell share its rates, so errors go together along a curve. Intervals of what a manipulation changed may be too narrow.` })
  if (!cells && plain.noise.kind === 'pooled') doubts.push({ code: 'depletion-assumed', sentence: 'The interval of each depletion assumes that cells differ by 10 % in rate and 0.025 in depletion.' })
  if (few) doubts.push({ code: 'few-cells', sentence: `One condition has ${fewest} ${fewest === 1 ? 'cell' : 'cells'}; fewer than ${FEWEST_CELLS} carry no claim.` })
  if (judgement.spread?.reading === 'open' && judgement.within.includes('spread')) doubts.push({ code: 'spread-open', sentence: 'Cells that differ can look like two phases when they are averaged; fit the cells one by one.' })
  return doubts
}

function ofMeaning({ plain, judgement }: Weighing): Doubt[] {
  const doubts: Doubt[] = [], meant = judgement.explanation ? [judgement.explanation] : judgement.within
  if (plain.protocols.length > 1) doubts.push({ code: 'uneven-emptying', sentence: 'A shorter first step may empty one kind of site more than the other; the fit assumes both alike.' })
  if (meant.includes('one-kind')) doubts.push({ code: 'one-curve', sentence: 'One curve is also what two kinds of vesicle give while the supply is ample.' })
  if (meant.includes('two-step')) doubts.push({ code: 'which-step', sentence: 'Which of the two steps is capture cannot be told from the curve.' })
  if (plain.manipulations.length > 0) doubts.push({ code: 'moving-time', sentence: 'A time constant that moves decides nothing by itself: one kind of site may have changed its probability.' }, { code: 'one-change', sentence: 'Each manipulation is taken to change one thing only.' })
  if (plain.manipulations.length === 0) doubts.push({ code: 'one-curve-only', sentence: 'Without a manipulation, kinds of site and kinds of vesicle rest on the shape of one curve. The variance test needs repeats within one cell and a known number of sites; neither is here.' })
  if (plain.untouched !== UNTOUCHED) doubts.push({ code: 'no-untouched', sentence: 'No untouched condition is among these.' })
  return doubts
}

const ALWAYS: Doubt[] = [
  { code: 'conditioning', sentence: 'The first step may itself speed refill for some seconds.' },
  { code: 'postsynaptic', sentence: 'Part of the second response may be set on the postsynaptic side.' },
  { code: 'run-down', sentence: 'Run-down over the series is not modelled.' },
  { code: 'equal-release', sentence: 'Every site is taken to release at the stimulus, and none to be fed by rows above it.' },
]

/**
 * Doubts of a weigh-up: first those of its own numbers, then those of its meaning, then those that always stand.
 * @param weighing - judged
 * @param candidates - of the document
 * @param input - recordings as given
 * @returns sentences with codes
 */
export function doubtsOf(weighing: Weighing, candidates: readonly WeighCandidate[], input: WeighInput): Doubt[] {
  const lead = candidates.find(one => one.best && one.explanation === (weighing.judgement.explanation ?? weighing.judgement.ranked[0]!.explanation))!
  const typed = input.settings.typedDepletion.map(one => one.protocol), doubts = typed.length > 0 ? [{ code: 'typed-depletion', sentence: `The depletion of ${listed(typed)} is taken as exact.` }] : []
  return [...farPoints(weighing, lead), ...ofValues(lead), ...ofCells(weighing, input), ...doubts, ...ofMeaning(weighing), ...ALWAYS]
}
