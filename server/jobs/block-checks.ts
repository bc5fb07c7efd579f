/** Whether the integers of blocks can be what a walk of this scenario leaves behind. What passes is then redrawn by the audit. */
import type { FieldProblem } from '../../shared/schemas/problem'
import { blockRanges } from '../../shared/walk/merge'
import type { OutcomeFrame } from '../../shared/walk/frame'
import type { ReplicateBlock } from '../../shared/walk/types'

/** Enough to tell what is wrong; a forged body could else be answered with a million lines. */
const MOST_PROBLEMS = 20
/** Scale of the decline's weighted exposure: a factor of 1 counts 65,536. */
const DECLINE_SCALE = 65_536

type Report = (path: string, message: string) => void
const sum = (row: readonly number[]) => {
  let total = 0
  for (const value of row) total += value
  return total
}

/**
 * Judges blocks against the compiled scenario.
 * @returns what cannot be, each with its path; empty when nothing speaks against them
 */
export function checkBlocks(frame: OutcomeFrame, run: { blocks: ReplicateBlock[], replicatesAsked: number, partial: boolean }): FieldProblem[] {
  const problems: FieldProblem[] = []
  checkRanges(run, (path, message) => problems.push({ path, message }))
  for (const [i, block] of run.blocks.entries()) {
    if (problems.length >= MOST_PROBLEMS) break
    const report: Report = (path, message) => problems.length < MOST_PROBLEMS && problems.push({ path: `blocks.${i}.${path}`, message })
    if (checkShape(frame, block, report)) checkCounts(frame, block, report)
  }
  return problems
}

/** Blocks stand in order from replicate 0, cut as every engine cuts them; only a partial run's last one may be shorter. */
function checkRanges({ blocks, replicatesAsked, partial }: { blocks: ReplicateBlock[], replicatesAsked: number, partial: boolean }, report: Report) {
  const wanted = blockRanges(replicatesAsked)
  blocks.forEach(({ from, to }, i) => {
    const range = wanted[i]
    const shorter = partial && i === blocks.length - 1 && range && from === range.from && to > from && to <= range.to
    if (!range || (!shorter && (from !== range.from || to !== range.to)))
      report(`blocks.${i}.from`, range ? `Replicates ${range.from} to ${range.to} are wanted here, not ${from} to ${to}.` : 'More blocks than the run has.')
  })
  const last = blocks.at(-1)
  if (partial && last && last.to >= replicatesAsked) report('partial', 'All replicates asked for are here, so the run is not partial.')
}

/** Every row has the length that the scenario gives it, and the optional rows are there exactly when they mean something. */
function checkShape(frame: OutcomeFrame, block: ReplicateBlock, report: Report): boolean {
  const classes = frame.sitesPerClass.length, samples = frame.sampleSteps.length, replicates = block.to - block.from
  let sound = true
  const refuse: Report = (path, message) => {
    sound = false
    report(path, message)
  }
  const table = (name: 'filledSum' | 'filledSumSq' | 'readySum' | 'readySumSq' | 'events' | 'exposureSteps' | 'declinedExposure', length: number, present = true) => {
    const rows = block[name]
    if (!present) return rows === undefined ? undefined : refuse(name, 'This scenario leaves no such counts.')
    if (rows?.length !== classes) return refuse(name, `${classes} rows are wanted, one for each kind of site.`)
    rows.forEach((row, j) => row.length === length || refuse(`${name}.${j}`, `${length} counts are wanted, not ${row.length}.`))
  }
  const twoStep = frame.readyPerStep.some(chance => chance !== null)
  table('filledSum', samples)
  table('filledSumSq', samples)
  table('readySum', samples, twoStep)
  table('readySumSq', samples, twoStep)
  table('events', replicates)
  table('exposureSteps', replicates)
  table('declinedExposure', replicates, frame.decline !== null)
  if (block.firstAttachment.length !== frame.histogramBins) refuse('firstAttachment', `${frame.histogramBins} bins are wanted, not ${block.firstAttachment.length}.`)
  if ((block.totalSumSq !== undefined) !== (classes === 2)) refuse('totalSumSq', 'Given exactly when there are two kinds of site.')
  else if (block.totalSumSq && block.totalSumSq.length !== samples) refuse('totalSumSq', `${samples} counts are wanted, not ${block.totalSumSq.length}.`)
  return sound
}

/** A sum and its sum of squares over replicates of counts between 0 and `most`. */
function checkMoments(sums: readonly number[], squares: readonly number[], most: number, replicates: number, path: string, report: Report) {
  for (let k = 0; k < sums.length; k += 1) {
    const total = sums[k]!, square = squares[k]!
    if (total > most * replicates) return report(`${path}.${k}`, `At most ${most} sites in each of ${replicates} replicates.`)
    // Integers: x ≤ x² ≤ most·x, and (Σx)² ≤ n·Σx².
    if (square < total || square > most * total || total * total > replicates * square) return report(`${path}Sq.${k}`, 'No replicates have this sum and this sum of squares.')
  }
}

function checkCounts(frame: OutcomeFrame, block: ReplicateBlock, report: Report) {
  const replicates = block.to - block.from
  const lasting = frame.releases.length === 0 && frame.detachPerStep.every(chance => chance === 0)
  let attached = 0
  frame.sitesPerClass.forEach((sites, j) => {
    const filled = block.filledSum[j]!, events = block.events[j]!
    checkMoments(filled, block.filledSumSq[j]!, sites, replicates, `filledSum.${j}`, report)
    attached += sum(events)
    checkExposure(frame, block, j, sites, lasting, report)
    if (lasting) checkLasting(frame, filled, sum(events), j, report)
    const ready = block.readySum?.[j]
    if (!ready) return
    checkMoments(ready, block.readySumSq![j]!, sites, replicates, `readySum.${j}`, report)
    const over = ready.findIndex((value, k) => value > filled[k]!)
    if (over >= 0) report(`readySum.${j}.${over}`, 'More sites are ready than filled.')
  })
  if (block.totalSumSq) checkMoments(block.filledSum[0]!.map((value, k) => value + block.filledSum[1]![k]!), block.totalSumSq, frame.siteCount, replicates, 'totalSum', report)
  const first = sum(block.firstAttachment)
  if (first > attached || first > frame.siteCount * replicates || (lasting && first !== attached)) report('firstAttachment', 'First attachments do not add up with the attachments counted.')
}

/** Each attachment ends an empty step; a site is empty for at most every step. */
function checkExposure(frame: OutcomeFrame, block: ReplicateBlock, j: number, sites: number, lasting: boolean, report: Report) {
  const declined = block.declinedExposure?.[j]
  block.exposureSteps[j]!.forEach((exposure, k) => {
    const events = block.events[j]![k]!
    if (exposure > sites * frame.steps) report(`exposureSteps.${j}.${k}`, `At most ${sites} sites over ${frame.steps} steps.`)
    else if (events > exposure) report(`events.${j}.${k}`, 'More attachments than empty steps.')
    else if (lasting && events > sites) report(`events.${j}.${k}`, `At most ${sites} sites attach, as none is emptied again.`)
    else if (declined && declined[k]! > exposure * DECLINE_SCALE) report(`declinedExposure.${j}.${k}`, 'More than the exposure itself.')
  })
}

/** Without releases and detachment sites only fill, and each filling is one attachment. */
function checkLasting(frame: OutcomeFrame, filled: readonly number[], attached: number, j: number, report: Report) {
  const falls = filled.findIndex((value, k) => k > 0 && value < filled[k - 1]!)
  if (falls >= 0) return report(`filledSum.${j}.${falls}`, 'Filled sites do not become fewer in this scenario.')
  const gained = filled[filled.length - 1]! - filled[0]!
  const whole = frame.sampleSteps[frame.sampleSteps.length - 1] === frame.steps
  if (gained > attached || (whole && gained !== attached)) report(`events.${j}`, `${attached} attachments do not make ${gained} more filled sites.`)
}
