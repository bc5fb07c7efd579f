/** Plans in boxes of any size at the trade's textbook density, and the estimates that walks are judged by. */
import { readFileSync } from 'node:fs'
import { plateInBox, type Placing } from '../../shared/walk/geometry'
import { classesOfSites } from '../../shared/walk/layout'
import { seedWords } from '../../shared/walk/streams'
import type { Algorithm, ReplicateBlock, WalkPlan } from '../../shared/walk/types'
import { createKernel } from '../../workers/engine'
import type { Kernel } from '../../workers/protocol'

export const freshKernel = (): Promise<Kernel> => createKernel(readFileSync(new URL('../../workers/kernel/kernel.wasm', import.meta.url)))

/** ρa³ of 2,210 /µm³ at 45 nm (common practice, no source). */
export const OCCUPANCY = 0.201386

export interface PlanWish extends Partial<WalkPlan> {
  /** Inner voxels. */
  box?: [number, number, number]
  placing?: Placing
  /** Attachment probability per hit, one class. */
  s?: number
}

/** Columns × rows sites in the middle of the wall of a box. */
export const onFloor = (columns: number, rows: number, box: [number, number, number]): { placing: Placing, box: [number, number, number] } => ({
  box, placing: { columns, rows, faces: 1, x: Math.floor((box[0] - columns) / 2), y: Math.floor((box[1] - rows) / 2), z: 0 },
})
/** A free plate with two faces in the middle of a box. */
export const freePlate = (columns: number, rows: number, box: [number, number, number]): { placing: Placing, box: [number, number, number] } => ({
  box, placing: { columns, rows, faces: 2, x: Math.floor((box[0] - columns) / 2), y: Math.floor((box[1] - rows) / 2), z: Math.floor((box[2] - 1) / 2) },
})

/** A plan by hand; without `box` a stirred one. Sampled at index 0 and at the end unless told otherwise. */
export function planOf({ box, placing, s = 1, ...wish }: PlanWish): WalkPlan {
  const supply = wish.supply ?? (box ? 'held' : 'stirred'), steps = wish.steps ?? 1000
  const built = box && placing && supply !== 'stirred'
    ? plateInBox(box, placing, supply)
    : { nx: 0, ny: 0, nz: 0, flags: new Uint8Array(0), siteBehind: new Int32Array(0), voxelOfSite: new Int32Array(wish.siteCount ?? 1).fill(-1), freeVoxels: 0 }
  const siteCount = built.voxelOfSite.length, occupancy = wish.occupancy ?? OCCUPANCY
  const sitesPerClass = wish.sitesPerClass ?? [siteCount]
  return {
    supply, crowding: 'independent', ...built, siteCount, classOfSite: classesOfSites(sitesPerClass, 'interleaved'), sitesPerClass,
    stepS: 0.00306818, steps, sampleSteps: Uint32Array.of(0, steps), occupancy,
    vesicles: [{ share: 1, attachFactor: 1, mobilityFactor: 1, number: supply === 'sealed' ? Math.round(occupancy * built.freeVoxels) : null }],
    attachProbability: [[s]], initialFill: 0, releases: [], detachPerStep: sitesPerClass.map(() => 0), readyPerStep: sitesPerClass.map(() => null), decline: null,
    histogramBinSteps: Math.ceil(steps / 512), histogramBins: Math.ceil(steps / Math.ceil(steps / 512)), ...wish,
  }
}

/** Walks replicates in chunks of 50, as callers do. */
export function walk(kernel: Kernel, plan: WalkPlan, algorithm: Algorithm, seed: string, replicates: number): ReplicateBlock[] {
  const [low, high] = seedWords(seed), prepared = kernel.prepare(plan, algorithm), blocks: ReplicateBlock[] = []
  for (let from = 0; from < replicates; from += 50) blocks.push(prepared.run(low, high, from, Math.min(replicates, from + 50)))
  return blocks
}

/** Estimate with its standard error. */
export interface Estimate { value: number, se: number }

/** Exposure over attachments of a site class in units of `unitSteps`; standard error over replicates. It is the mean attachment time where all sites filled once. */
export function meanTime(blocks: ReplicateBlock[], unitSteps: number, siteClass = 0): Estimate {
  const events = blocks.flatMap(block => block.events[siteClass]!), exposure = blocks.flatMap(block => block.exposureSteps[siteClass]!)
  const total = events.reduce((sum, one) => sum + one, 0), value = exposure.reduce((sum, one) => sum + one, 0) / total
  const squares = exposure.reduce((sum, one, k) => sum + (one - value * events[k]!) ** 2, 0)
  return { value: value / unitSteps, se: Math.sqrt(squares) / total / unitSteps }
}

/** Mean filled (or ready) sites at a sample. */
export function meanFilled(blocks: ReplicateBlock[], sample: number, siteClass = 0, what: 'filled' | 'ready' = 'filled'): Estimate {
  const replicates = blocks.reduce((sum, block) => sum + block.to - block.from, 0)
  const sums = blocks.map(block => (what === 'filled' ? block.filledSum : block.readySum!)[siteClass]![sample]!)
  const squares = blocks.map(block => (what === 'filled' ? block.filledSumSq : block.readySumSq!)[siteClass]![sample]!)
  const value = sums.reduce((sum, one) => sum + one, 0) / replicates
  const variance = squares.reduce((sum, one) => sum + one, 0) / replicates - value * value
  return { value, se: Math.sqrt(Math.max(variance, 0) / (replicates - 1)) }
}

/** Distance of an estimate from a reference in joint standard errors. */
export const distance = (one: Estimate, reference: number, referenceSe = 0): number =>
  Math.abs(one.value - reference) / Math.sqrt(one.se ** 2 + referenceSe ** 2)
