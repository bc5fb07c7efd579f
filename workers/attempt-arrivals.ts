/** First attempts of one vesicle class in one run: how many, in which class of starts, at which step. */
import { binomialTable, poissonTable, type CountTable } from '../shared/walk/counts'
import type { WalkPlan } from '../shared/walk/types'
import { attemptExports, type Scratch } from './attempt-kernel'
import type { TableSet } from './attempt-tables'
import type { KernelHost } from './host'

export interface Arrivals {
  counts: CountTable
  /** Largest number that can be drawn. */
  most: number
  kinds: number
  kindCount: number
  early: number
  earlySteps: number
  tailBlocks: number
  tailBlockCount: number
}

/** x^n by squaring; Math.pow may differ by a last digit between engines. */
function power(x: number, n: number): number {
  let result = 1
  for (let base = x, rest = n; rest > 0; rest = Math.floor(rest / 2), base *= base) if (rest % 2 === 1) result *= base
  return result
}

/** Weights of a class of starts after its explicit steps: at a constant rate for ever, and two interleaved geometric tails (steps n0, n0+2, … and n0+1, n0+3, …). */
function lateWeights(set: TableSet, tails: Float64Array, kind: number, steps: number): [number, number, number] {
  const later = steps - set.waitSteps
  if (!set.steady || later <= 0) return [0, 0, 0]
  const [first, second, gone] = tails.subarray(3 * kind, 3 * kind + 3) as unknown as [number, number, number]
  const sum = (head: number, terms: number) => head * (1 - power(set.ratio, terms)) / (1 - set.ratio)
  return [gone * later, sum(first + second, Math.ceil(later / 2)), sum(first * set.ratio + second, Math.floor(later / 2))]
}

function placeRow(host: KernelHost, scratch: Scratch, weights: number[]): number {
  const cells = scratch.room(4 * weights.length), room = host.allocate(8 * weights.length), heap = host.place(Float64Array.from(weights))
  attemptExports(host).makeRow(heap, weights.length, cells, room)
  host.release(heap)
  host.release(room)
  return cells
}

/** Early rows of all classes, in the order of the set; returns the sums of their weights. */
function earlyRows(host: KernelHost, set: TableSet, steps: number, cells: number): number[] {
  const room = host.allocate(16 * steps), law = set.pointer + set.offsets.law
  const sums = Array.from({ length: set.classes }, (_, kind) =>
    attemptExports(host).makeEarlyRow(law + 4 * kind, 4 * set.classes, steps, cells + 4 * steps * kind, room))
  host.release(room)
  return sums
}

/**
 * Makes the arrivals of one vesicle class.
 * @param host - the kernel
 * @param scratch - owner of the memory
 * @param plan - compiled plan
 * @param vesicleClass - index of the vesicle class
 * @param set - tables of its mobility
 * @returns rows in memory and the law of the number
 */
export function makeArrivals(host: KernelHost, scratch: Scratch, plan: WalkPlan, vesicleClass: number, set: TableSet): Arrivals {
  const vesicle = plan.vesicles[vesicleClass]!, earlySteps = Math.min(set.waitSteps, plan.steps)
  const early = scratch.room(4 * earlySteps * set.classes)
  const sums = earlyRows(host, set, earlySteps, early)
  const tails = host.doubles(set.pointer + set.offsets.tails, 3 * set.classes).slice()
  const members = new Uint16Array(host.bytes(set.pointer + set.offsets.memberCounts, 2 * set.classes).slice().buffer)
  const weights = sums.flatMap((sum, kind) => [sum, ...lateWeights(set, tails, kind, plan.steps)].map(weight => weight * members[kind]!))
  const total = weights.reduce((sum, weight) => sum + weight, 0) * set.attemptChance / 6 * vesicle.mobilityFactor
  const counts = vesicle.number === null ? poissonTable(plan.occupancy * vesicle.share * total) : binomialTable(vesicle.number, total / plan.freeVoxels)
  const blocks: number[] = []
  for (let block = 0, weight = 1; block * 512 < plan.steps - earlySteps; block++, weight *= power(set.ratio, 256)) blocks.push(weight)
  if (blocks.length === 0) blocks.push(1)
  return {
    counts, most: counts.first + counts.thresholds.length - 1,
    kinds: placeRow(host, scratch, weights), kindCount: weights.length, early, earlySteps,
    tailBlocks: placeRow(host, scratch, blocks), tailBlockCount: blocks.length,
  }
}
