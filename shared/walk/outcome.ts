/** Makes the outcome document from replicate blocks. Browser, server and command line call this one function and get the same bits. */
import type { Outcome, OutcomeClass } from '../schemas/outcome'
import type { Scenario } from '../schemas/scenario'
import { closedForm, closedFormFilled } from '../kinetics/closed-form'
import { DEFAULT_MARGIN_PERCENT, exactLawTest, reasonOf, replicatesToDecide, verdictOf } from './agreement'
import { decompositions } from './decompose'
import { blockDigest, outcomeDigest, scenarioDigest } from './digest'
import { frameOf, type OutcomeFrame } from './frame'
import { mergeAll } from './merge'
import { estimatesOf, type Estimate, type Estimates } from './statistics'
import { seedWords } from './streams'
import { expectedAndSeen, sumOf, talliesOf } from './tallies'
import type { EngineId, ReplicateBlock } from './types'

export interface OutcomeInput {
  scenario: Scenario
  /** Compiled beforehand by a caller who builds many outcomes of one scenario. */
  frame?: OutcomeFrame
  seed: string
  engine: EngineId
  /** Contiguous from replicate 0 on, in order. */
  blocks: readonly ReplicateBlock[]
  /** Digests of the blocks where they are known already. */
  blockDigests?: readonly string[]
  partial: boolean
  landingError: number
  marginPercent?: number
}

const TAU_METHOD = 'exposure of empty sites per attachment; 95 % interval from resampled replicates'
/** Refill reaches 63 % when 1/e of the sites empty at the start are left. */
const FILLED_AT_TAU = 1 - Math.exp(-1)

/**
 * The outcome of a run.
 * @param input - scenario, seed, engine and blocks
 * @returns the `moorage-outcome` document; times in seconds, counts per ribbon, totals over replicates
 * @throws RangeError when the blocks have a gap or do not start at replicate 0
 */
export function buildOutcome(input: OutcomeInput): Outcome {
  const { scenario, seed, engine, blocks, partial, landingError, marginPercent = DEFAULT_MARGIN_PERCENT } = input
  const frame = input.frame ?? frameOf(scenario)
  const whole = mergeAll(blocks)
  if (whole.from !== 0) throw new RangeError(`buildOutcome: the first block starts at replicate ${whole.from}`)
  const replicates = whole.to
  const tallies = talliesOf(frame, whole)
  const estimates = estimatesOf(scenario, frame, tallies, seedWords(seed))
  const parts = decompositions(scenario, frame, { kinds: estimates.depletion, all: estimates.allDepletion })
  const timesS = Array.from(frame.sampleSteps, step => step * frame.stepS)
  const ratio = estimates.allRatio
  const verdict = verdictOf(ratio, marginPercent)
  const classes = scenario.sites.map((_, j) => classOf(scenario, frame, whole, estimates, j, parts.kinds[j]!, marginPercent))
  const digests = input.blockDigests ?? blocks.map(blockDigest)
  const ofScenario = scenarioDigest(scenario)
  return {
    format: 'moorage-outcome', version: 1, scenarioDigest: ofScenario,
    engine: { name: engine.name, version: engine.version, algorithm: engine.algorithm },
    seed, replicates, timesS, classes,
    varFilledTotal: varianceRow(totalRow(whole), whole.totalSumSq ?? whole.filledSumSq[0]!, replicates),
    firstAttachment: { stepS: frame.histogramBinSteps * frame.stepS, histogram: whole.firstAttachment },
    tau: tauOf(frame, whole, estimates, timesS),
    closedForm: closedFormPart(scenario, frame, timesS),
    ratio,
    agreement: {
      verdict, marginPercent,
      reason: reasonOf(frame, verdict, { replicates, seen: expectedAndSeen(tallies).seen, netAttached: netAttached(frame, whole) }),
      replicatesToDecide: verdict === 'undecided' ? replicatesToDecide(ratio, replicates, marginPercent) : null,
      ...exactLawTest(tallies),
    },
    decomposition: parts.all, landingErrorPerJump: landingError,
    blocks: blocks.map(({ from, to }, i) => ({ from, to, digest: digests[i]! })),
    partial,
    digest: outcomeDigest({ scenarioDigest: ofScenario, engine, seed, replicates, blockDigests: [...digests] }),
  }
}

/** Variance between replicates; 0 for a single one, which has none. */
const varianceRow = (sums: readonly number[], squares: readonly number[], replicates: number): number[] => sums.map((sum, i) =>
  replicates < 2 ? 0 : Math.max(0, (squares[i]! - sum * sum / replicates) / (replicates - 1)))
const meanRow = (sums: readonly number[], replicates: number): number[] => sums.map(sum => sum / replicates)
const totalRow = (block: ReplicateBlock): number[] => block.filledSum[0]!.map((first, i) => first + (block.filledSum[1]?.[i] ?? 0))

function classOf(scenario: Scenario, frame: OutcomeFrame, whole: ReplicateBlock, estimates: Estimates, j: number, decomposition: OutcomeClass['decomposition'], marginPercent: number): OutcomeClass {
  const { name, attachProbability, readyPerS } = scenario.sites[j]!
  const replicates = whole.to
  const { value, low, high } = estimates.tau[j]!
  const ready = readyPerS !== null && whole.readySum
    ? { meanReady: meanRow(whole.readySum[j]!, replicates), varReady: varianceRow(whole.readySum[j]!, whole.readySumSq![j]!, replicates) }
    : {}
  return {
    name, sites: frame.sitesPerClass[j]!, attachProbability,
    meanFilled: meanRow(whole.filledSum[j]!, replicates), varFilled: varianceRow(whole.filledSum[j]!, whole.filledSumSq[j]!, replicates), ...ready,
    events: sumOf(whole.events[j]), exposureS: sumOf(whole.exposureSteps[j]) * frame.stepS,
    tau: { valueS: value, lowS: low, highS: high },
    closedFormTauS: closedForm(scenario).classes[j]!.tauS,
    ratio: estimates.ratio[j]!,
    reading: estimates.ratio[j]!.value === null ? null : verdictOf(estimates.ratio[j]!, marginPercent),
    decomposition,
  }
}

/** Over all: given for one kind of site, or when every site filled for good, where it is the plain mean attachment time. */
function tauOf(frame: OutcomeFrame, whole: ReplicateBlock, estimates: Estimates, timesS: number[]): Outcome['tau'] {
  const filled = totalRow(whole), sitesInAll = frame.siteCount * whole.to
  const unfilledShare = 1 - filled[filled.length - 1]! / sitesInAll
  const forGood = unfilledShare === 0 && frame.releases.length === 0 && frame.detachPerStep.every(chance => chance === 0)
  const present = frame.sitesPerClass.filter(sites => sites > 0).length
  const tau: Estimate = present === 1 || forGood ? estimates.allTau : { value: null, low: null, high: null }
  return { valueS: tau.value, lowS: tau.low, highS: tau.high, t63S: t63(frame, meanRow(filled, whole.to), timesS), unfilledShare, method: TAU_METHOD }
}

/** Time by which 1 − 1/e of the sites empty at the start have filled, read off the mean curve before the first release. */
function t63(frame: OutcomeFrame, meanFilled: number[], timesS: number[]): number | null {
  const start = meanFilled[0]!, wanted = start + FILLED_AT_TAU * (frame.siteCount - start)
  const until = frame.releases[0] ? frame.releases[0].step * frame.stepS : Infinity
  const at = meanFilled.findIndex((mean, i) => mean >= wanted && timesS[i]! <= until)
  if (at <= 0) return null
  const below = meanFilled[at - 1]!, above = meanFilled[at]!
  return timesS[at - 1]! + (wanted - below) / (above - below) * (timesS[at]! - timesS[at - 1]!)
}

function closedFormPart(scenario: Scenario, frame: OutcomeFrame, timesS: number[]): Outcome['closedForm'] {
  const form = closedForm(scenario)
  return {
    tauS: form.tauS,
    components: form.classes.map(one => ({ name: one.name, tauS: one.tauS, share: one.sites / frame.siteCount })),
    filled: closedFormFilled(scenario, timesS).filled,
  }
}

/** Vesicles that a replicate takes from the pool for good, on average: attachments, or the net gain in filled sites where vesicles come back by detachment. */
function netAttached(frame: OutcomeFrame, whole: ReplicateBlock): number {
  const attached = (sumOf(whole.events[0]) + sumOf(whole.events[1])) / whole.to
  if (frame.detachPerStep.every(chance => chance === 0)) return attached
  const mean = meanRow(totalRow(whole), whole.to)
  return Math.min(attached, Math.max(...mean) - mean[0]!)
}
