/** The landing law: one solve per class of starts in the box near the ribbon, binned by waiting time. */
import { placeBox } from './attempt-tables'
import { returnsOf, type RibbonBox } from './attempt-boxes'
import { attemptExports, type Scratch } from './attempt-kernel'
import { likenesses, orderFrom, type Starts } from './attempt-starts'
import type { KernelHost } from './host'

export interface LandingRows {
  steps: number
  bins: number
  binOf: Uint8Array
  /** {offset, length} [class][bin·2 + parity] into `cells`. */
  rows: Uint32Array
  cells: Uint32Array
  /** [class][rank] site. */
  order: Uint16Array
  /** Largest total-variation error per jump over the classes. */
  error: number
}
export interface LandingTask {
  starts: Starts
  /** Upper ends of the bins [steps]. */
  ends: number[]
  attemptChance: number
  mobility: number
  waits: { steps: number, pointer: number, tails: Float64Array }
  /** True when the near box is the whole box. */
  whole: boolean
}

/** Word and f64 places of the fields of LandingSolve that change from class to class. */
const FIELD = { start: 1, waits: 9, solved: 12, made: 17, lateOdd: 80, error: 96 } as const

function binOfSteps(ends: number[]): Uint8Array {
  const bins = new Uint8Array(ends[ends.length - 1]! + 1)
  let bin = 0
  for (let step = 1; step < bins.length; step++) {
    if (step > ends[bin]!) bin++
    bins[step] = bin
  }
  return bins
}

/** Error per jump of landings that come from outside the near box or after the last bin's steps, relative to their mass; measured by full solves (tests/unit/attempt). */
const FAR_ERROR = 0.02
const LATE_ERROR = 0.004

/** One class after another; mirror images of a solved class follow it at once and share its solve. */
class LandingSolver {
  private readonly job: number
  private readonly frontsOfRank: number
  private readonly ranked: number
  private readonly cells: number
  private readonly lengths: number
  private readonly far: Float64Array | null
  private readonly steps: number
  error = 0

  constructor(private readonly host: KernelHost, scratch: Scratch, private readonly near: RibbonBox, private readonly task: LandingTask, binOf: Uint8Array) {
    const { ends, attemptChance, mobility, waits } = task, sites = near.fronts.length, bins = ends.length
    this.steps = ends[bins - 1]!
    this.frontsOfRank = scratch.place(Int32Array.from(near.fronts))
    this.ranked = scratch.room(8 * sites)
    this.cells = scratch.room(8 * bins * sites)
    this.lengths = scratch.room(8 * bins)
    const laws = scratch.room(4 * this.steps * sites), sums = scratch.room(16 * bins * sites)
    this.job = scratch.words([
      placeBox(host, scratch, near, near.holes, returnsOf(near, attemptChance), mobility), 0, this.frontsOfRank, sites, this.steps, scratch.place(binOf), bins,
      laws, sums, 0, 4 * task.starts.count, waits.steps, 0, task.whole ? 0 : this.ranked,
      this.cells, this.lengths, scratch.room(16 * sites), 0,
      { double: attemptChance / 6 * mobility }, { double: 0 }, { double: 0 }, { double: 0 }, { double: 0 }, { double: 0 },
    ])
    this.far = task.whole ? null : this.solveFar(scratch.room(8 * sites), sites)
  }

  private solveFar(out: number, sites: number): Float64Array {
    attemptExports(this.host).solveFar(this.job, out)
    return this.host.doubles(out, sites).slice()
  }

  /** Rows of one class; `solved` when the last solve was that of its mirror image. */
  rowsOf(kind: number, order: number[], solved: boolean): { lengths: Uint32Array, cells: Uint32Array } {
    const { host, job, task, near } = this, { waits } = task
    host.words(this.frontsOfRank, order.length).set(order.map(site => near.fronts[site]!))
    if (this.far) host.doubles(this.ranked, order.length).set(order.map(site => this.far![site]!))
    const words = host.words(job, 18), [first, second] = waits.tails.subarray(3 * kind, 3 * kind + 2)
    words[FIELD.start] = near.fronts[order[0]!]!
    words[FIELD.waits] = waits.pointer + 4 * kind
    words[FIELD.solved] = solved ? 1 : 0
    host.doubles(job + FIELD.lateOdd, 2).set(waits.steps % 2 === 0 ? [first!, second!] : [second!, first!])
    attemptExports(host).solveLandings(job)
    const [error, farMass, lateMass] = host.doubles(job + FIELD.error, 3)
    this.error = Math.max(this.error, error! + FAR_ERROR * farMass! + LATE_ERROR * lateMass!)
    return { lengths: host.words(this.lengths, 2 * task.ends.length).slice(), cells: host.words(this.cells, host.words(job, 18)[FIELD.made]!).slice() }
  }
}

function join(parts: { lengths: Uint32Array, cells: Uint32Array }[], rowsPerClass: number): { rows: Uint32Array, cells: Uint32Array } {
  const rows = new Uint32Array(2 * rowsPerClass * parts.length), cells = new Uint32Array(parts.reduce((sum, part) => sum + part.cells.length, 0))
  let at = 0, row = 0
  for (const part of parts) {
    cells.set(part.cells, at)
    for (const length of part.lengths) {
      rows[row++] = at
      rows[row++] = length
      at += length
    }
  }
  return { rows, cells }
}

/** Solves the landing laws of all classes and makes their rows. */
export function landingRows(host: KernelHost, scratch: Scratch, near: RibbonBox, task: LandingTask): LandingRows {
  const { starts, ends } = task, binOf = binOfSteps(ends), sites = near.fronts.length
  const solver = new LandingSolver(host, scratch, near, task, binOf)
  const { alike, images } = likenesses(near, starts)
  const parts: { lengths: Uint32Array, cells: Uint32Array }[] = [], order = new Uint16Array(starts.count * sites)
  for (let kind = 0; kind < starts.count; kind++) {
    if (alike[kind]) continue
    const ranked = orderFrom(near, starts.representatives[kind]!)
    for (let other = kind; other < starts.count; other++) {
      const likeness = other === kind ? { of: kind, mirror: 0 } : alike[other]
      if (likeness?.of !== kind) continue
      const around = ranked.map(site => images[likeness.mirror * sites + site]!)
      parts[other] = solver.rowsOf(other, around, other !== kind)
      order.set(around, other * sites)
    }
  }
  return { steps: ends[ends.length - 1]!, bins: ends.length, binOf, order, error: solver.error, ...join(parts, 2 * ends.length) }
}
