/** The landing law: one solve per class of starts in the box near the ribbon, binned by waiting time. */
import { placeBox } from './attempt-tables'
import { lateLaws, type LateLaws } from './attempt-late'
import { returnsOf, type RibbonBox } from './attempt-boxes'
import { attemptExports, type Scratch } from './attempt-kernel'
import { likenesses, orderFrom, type Starts } from './attempt-starts'
import type { KernelHost } from './host'

export interface LandingRows {
  /** First step of the last bin, and bins in all. */
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

/** Word and byte places of the fields of LandingSolve that change from class to class. */
const FIELD = { start: 1, waits: 9, solved: 12, made: 20, error: 96 } as const
const WORDS = 21

function binOfSteps(ends: number[]): Uint8Array {
  const bins = new Uint8Array(ends[ends.length - 1]! + 1)
  let bin = 0
  for (let step = 1; step < bins.length; step++) {
    if (step > ends[bin]!) bin++
    bins[step] = bin
  }
  return bins
}

/** Error per jump of landings from outside the near box, relative to their mass; and of late landings, relative to what is left of the start's own difference. Held against full solves by tests/unit/attempt. */
const RELATIVE_ERROR = { far: 0.01, late: 0.55 } as const

/** One class after another; mirror images of a solved class follow it at once and share its solve. */
class LandingSolver {
  private readonly job: number
  private readonly frontsOfRank: number
  private readonly ranked: number
  private readonly cells: number
  private readonly lengths: number
  private readonly lateLaws: number
  private readonly rows: number
  private readonly far: Float64Array | null
  private readonly steps: number
  error = 0

  constructor(private readonly host: KernelHost, scratch: Scratch, private readonly near: RibbonBox, private readonly task: LandingTask, private readonly late: LateLaws, binOf: Uint8Array) {
    const { ends, attemptChance, mobility, waits } = task, sites = near.fronts.length, bins = ends.length
    this.steps = ends[bins - 1]!
    this.frontsOfRank = scratch.place(Int32Array.from(near.fronts))
    this.ranked = scratch.room(8 * sites)
    this.rows = 2 * (bins + late.ends.length)
    this.cells = scratch.room(4 * this.rows * sites)
    this.lengths = scratch.room(4 * this.rows)
    this.lateLaws = scratch.room(8 * late.laws.length)
    const laws = scratch.room(4 * this.steps * sites), sums = scratch.room(8 * this.rows * sites)
    this.job = scratch.words([
      placeBox(host, scratch, near, near.holes, returnsOf(near, attemptChance), mobility), 0, this.frontsOfRank, sites, this.steps, scratch.place(binOf), bins,
      laws, sums, 0, 4 * task.starts.count, waits.steps, 0, task.whole ? 0 : this.ranked,
      this.cells, this.lengths, this.lateLaws, scratch.place(late.shares), late.ends.length, scratch.room(16 * sites), 0,
      { double: attemptChance / 6 * mobility }, { double: 0 }, { double: 0 }, { double: 0 }, { double: 0 },
    ])
    this.far = task.whole ? null : this.solveFar(scratch.room(8 * sites), sites)
  }

  private solveFar(out: number, sites: number): Float64Array {
    attemptExports(this.host).solveFar(this.job, out)
    return this.host.doubles(out, sites).slice()
  }

  /** Rows of one class; `solved` when the last solve was that of its mirror image. */
  rowsOf(kind: number, order: number[], solved: boolean): { lengths: Uint32Array, cells: Uint32Array } {
    const { host, job, task, near, late } = this, { waits } = task
    host.words(this.frontsOfRank, order.length).set(order.map(site => near.fronts[site]!))
    if (this.far) host.doubles(this.ranked, order.length).set(order.map(site => this.far![site]!))
    const laws = host.doubles(this.lateLaws, late.laws.length), count = order.length
    for (let row = 0; row < late.laws.length; row += count) order.forEach((site, rank) => laws[row + rank] = late.laws[row + site]!)
    const words = host.words(job, WORDS)
    words[FIELD.start] = near.fronts[order[0]!]!
    words[FIELD.waits] = waits.pointer + 4 * kind
    words[FIELD.solved] = solved ? 1 : 0
    attemptExports(host).solveLandings(job)
    const [error, far, later, difference] = host.doubles(job + FIELD.error, 4)
    this.error = Math.max(this.error, error! + RELATIVE_ERROR.far * far! + RELATIVE_ERROR.late * later! * difference!)
    return { lengths: host.words(this.lengths, this.rows).slice(), cells: host.words(this.cells, host.words(job, WORDS)[FIELD.made]!).slice() }
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
  const { starts, ends } = task, sites = near.fronts.length, late = lateLaws(host, task, sites)
  const binOf = binOfSteps([...ends, ...late.ends])
  const solver = new LandingSolver(host, scratch, near, task, late, binOf)
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
  return { steps: binOf.length - 1, bins: ends.length + late.ends.length, binOf, order, error: solver.error, ...join(parts, 2 * (ends.length + late.ends.length)) }
}
