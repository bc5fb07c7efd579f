/** Solves and packs the tables of one geometry, s_max and mobility: position-independent bytes in the kernel's memory. */
import { ATTEMPT_TABLE_LIMIT, WAIT_LIMIT, estimateWaitSteps, landingBins, landingSpan } from '../shared/walk/attempt-size'
import type { WalkPlan } from '../shared/walk/types'
import { cropBox, foldBox, mirrorAxes, returnsOf, ribbonBoxOf, type RibbonBox } from './attempt-boxes'
import { Scratch, attemptExports } from './attempt-kernel'
import { landingRows, type LandingRows } from './attempt-landings'
import { startsOf, type Starts } from './attempt-starts'
import type { KernelHost } from './host'

/** Where the arrays of a set lie, in bytes from its start. */
export const SECTIONS = ['waits', 'law', 'tails', 'rows', 'cells', 'order', 'classOf', 'mirrorOf', 'mirrors', 'members', 'memberCounts', 'binOf', 'digits'] as const
export type Section = typeof SECTIONS[number]

/** One set of tables in memory. `tails` holds f64 [class][late first, late second, gone]. */
export interface TableSet {
  classes: number
  sites: number
  /** Explicit waits, and true when the tail after them is known (otherwise the set serves runs of up to `waitSteps` steps). */
  waitSteps: number
  steady: boolean
  /** Ratio of the tail over two steps. */
  ratio: number
  lateDigits: number
  landingSteps: number
  bins: number
  attemptChance: number
  landingError: number
  offsets: Record<Section, number>
  pointer: number
  bytes: number
}

interface Waits { steps: number, steady: boolean, ratio: number, pointer: number, tails: Float64Array }

/** Writes a Box for the kernel. */
export function placeBox(host: KernelHost, scratch: Scratch, box: { size: readonly [number, number, number], faces: number[] }, holes: number[], returns: Map<number, number>, mobility: number): number {
  const bytes = 4 * ((box.size[0] + 2) * (box.size[1] + 2) * (box.size[2] + 2) + 8)
  const pairs = new Int32Array(2 * returns.size), shares = new Float32Array(pairs.buffer)
  let i = 0
  for (const [p, share] of returns) {
    pairs[i++] = p
    shares[i++] = share
  }
  // A share and its rest that add up to 1 exactly in f32, or the field would drift.
  const single = mobility >= 0.5 ? Math.fround(mobility) : 1 - Math.fround(1 - mobility)
  return scratch.words([
    ...box.size, ...box.faces, scratch.room(bytes), scratch.room(bytes),
    scratch.place(Int32Array.from(holes)), holes.length, scratch.place(pairs), returns.size, { single }, 1, box.size[1], 1, box.size[2],
  ])
}

/** Masses after the last explicit step: odd and even continuation, and what never comes. */
function tailsOf(host: KernelHost, starts: Starts, law: number, survival: number, steps: number, steady: boolean, ratio: number, sealed: boolean): Float64Array {
  const tails = new Float64Array(3 * starts.count), waits = new Float32Array(host.exports.memory.buffer, law, steps * starts.count), left = host.doubles(survival, starts.count)
  for (let kind = 0; kind < starts.count; kind++) {
    const first = steps > 1 ? waits[(steps - 2) * starts.count + kind]! : 0, second = waits[(steps - 1) * starts.count + kind]!
    const rest = Math.max(0, left[kind]!)
    let late = [0, 0]
    if (steady && sealed) late = [rest * first / (first + second), rest * second / (first + second)]
    else if (steady && ratio > 0) late = [first * ratio / (1 - ratio), second * ratio / (1 - ratio)]
    tails.set([late[0]!, late[1]!, Math.max(0, rest - late[0]! - late[1]!)], 3 * kind)
  }
  return tails
}

/** The waiting law of every class, on the box folded at its mirror planes. */
function solveWaits(host: KernelHost, scratch: Scratch, plan: WalkPlan, box: RibbonBox, starts: Starts, attemptChance: number, mobility: number): Waits {
  const folded = foldBox(box, mirrorAxes(box))
  const returns = new Map([...returnsOf(box, attemptChance)].filter(([p]) => folded.keeps(p)).map(([p, share]) => [folded.fold(p), share]))
  const holes = [...new Set(box.holes.map(folded.fold))]
  const steps = Math.min(plan.steps, WAIT_LIMIT, 2 * estimateWaitSteps(plan, mobility)), sealed = plan.supply === 'sealed'
  const fronts = [...new Set(box.fronts.map(folded.fold))]
  const law = scratch.room(4 * steps * starts.count), survival = scratch.room(8 * starts.count)
  const job = scratch.words([
    placeBox(host, scratch, folded, holes, returns, mobility),
    scratch.place(Int32Array.from(fronts)), fronts.length,
    scratch.place(Int32Array.from(starts.representatives, site => folded.fold(box.fronts[site]!))), starts.count,
    // A class that hardly ever moves would overflow the window; beyond the steps solved its length no longer matters.
    steps, 32 * Math.min(1 << 20, Math.round(8 / mobility)), sealed ? 1 : 0, law, survival, scratch.room(8 * (Math.floor(steps / 32) + 1) * starts.count), 0, 0,
    { double: attemptChance / 6 * mobility }, { double: 0 },
  ])
  attemptExports(host).solveWaits(job)
  const [solved, steady] = host.words(job + 44, 2), ratio = host.doubles(job + 64, 1)[0]!
  return { steps: solved!, steady: steady === 1, ratio: Math.min(ratio, 1 - 1e-9), pointer: law, tails: tailsOf(host, starts, law, survival, solved!, steady === 1, ratio, sealed) }
}

/** Base-256 digits that matter of a geometric number. */
export function digitsOf(ratio: number): number {
  let power = ratio, digits = 0
  do {
    for (let i = 0; i < 8; i++) power *= power
    digits++
  } while (power > 1e-12 && digits < 3)
  return digits
}

/** Lays sections one after another, 16-byte aligned. */
function layOut(lengths: Record<Section, number>): { offsets: Record<Section, number>, bytes: number } {
  const offsets = {} as Record<Section, number>
  let bytes = 0
  for (const section of SECTIONS) {
    offsets[section] = bytes
    bytes += Math.ceil(lengths[section] / 16) * 16
  }
  return { offsets, bytes }
}

function pack(host: KernelHost, starts: Starts, waits: Waits, landings: LandingRows, sites: number, attemptChance: number): TableSet {
  const arrays = {
    tails: waits.tails, rows: landings.rows, cells: landings.cells, order: landings.order, binOf: landings.binOf,
    classOf: starts.classOf, mirrorOf: starts.mirrorOf, mirrors: starts.mirrors, members: starts.members, memberCounts: starts.memberCounts,
  }
  const law = 4 * waits.steps * starts.count, cells = waits.steps + 3
  const lengths = { waits: 4 * cells * starts.count, law, digits: 3072 } as Record<Section, number>
  for (const [section, array] of Object.entries(arrays)) lengths[section as Section] = array.byteLength
  const { offsets, bytes } = layOut(lengths)
  if (bytes > ATTEMPT_TABLE_LIMIT) throw new RangeError(`The tables take ${bytes} bytes; at most ${ATTEMPT_TABLE_LIMIT}.`)
  const pointer = host.allocate(bytes)
  for (const [section, array] of Object.entries(arrays))
    host.bytes(pointer + offsets[section as Section], array.byteLength).set(new Uint8Array(array.buffer, array.byteOffset, array.byteLength))
  host.bytes(pointer + offsets.law, law).set(host.bytes(waits.pointer, law))
  const room = host.allocate(16 * cells + 4096), lateDigits = digitsOf(waits.ratio)
  for (let kind = 0; kind < starts.count; kind++) {
    const [first, second, gone] = waits.tails.subarray(3 * kind, 3 * kind + 3)
    attemptExports(host).makeWaitRow(waits.pointer + 4 * kind, 4 * starts.count, waits.steps, first!, second!, gone!, pointer + offsets.waits + 4 * cells * kind, room)
  }
  attemptExports(host).geometricRows(waits.ratio, lateDigits, pointer + offsets.digits, room)
  host.release(room)
  return {
    classes: starts.count, sites, waitSteps: waits.steps, steady: waits.steady, ratio: waits.ratio, lateDigits,
    landingSteps: landings.steps, bins: landings.bins, attemptChance, landingError: landings.error, offsets, pointer, bytes,
  }
}

/**
 * Builds the tables of one mobility.
 * @param host - the kernel
 * @param plan - compiled plan; of it only geometry, supply and number of steps matter
 * @param attemptChance - s_max: chance that a hop against a site face is an effective attempt [1]
 * @param mobility - chance of moving in a step [1]
 * @returns the set in memory
 */
export function buildTables(host: KernelHost, plan: WalkPlan, attemptChance: number, mobility: number): TableSet {
  const scratch = new Scratch(host)
  try {
    const span = landingSpan(plan, attemptChance, mobility)
    const box = ribbonBoxOf(plan), starts = startsOf(box), near = cropBox(box, span.margin)
    const waits = solveWaits(host, scratch, plan, box, starts, attemptChance, mobility)
    if (!waits.steady && waits.steps < plan.steps) throw new RangeError('The waiting law of this plan does not settle within what its tables may hold.')
    // Tables depend on the number of steps only where it cuts the waiting law short: what a cache holds must be what a fresh build makes.
    const ends = landingBins(waits.steady ? span.steps : Math.min(span.steps, waits.steps))
    const landings = landingRows(host, scratch, near, { starts, ends, attemptChance, mobility, waits, whole: near.size.every((n, axis) => n === box.size[axis]) })
    return pack(host, starts, waits, landings, box.fronts.length, attemptChance)
  } finally {
    scratch.release()
  }
}
