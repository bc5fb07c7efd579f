/** Shapes that the walk's rooms hand to each other: compiled plan, replicate block, engine. */

/** `stirred` is the closed form's own assumption; the three others walk on the lattice (KERNEL of the project's docs: DEVELOPERS.md). */
export type Algorithm = 'stirred' | 'attempt' | 'touch' | 'step'
/** What a person may ask for; `auto` routes by plan. */
export type AskedAlgorithm = 'auto' | 'attempt' | 'touch' | 'step'

export interface EngineId {
  name: 'moorage-walk'
  /** Version of the kernel; raised by every change that moves a number. */
  version: string
  algorithm: Algorithm
}

export interface PlanVesicle {
  /** Share of the resting density [1]. */
  share: number
  /** Factor on every site's attachment probability [1]. */
  attachFactor: number
  /** Probability that a vesicle of this class moves in a step [1]. */
  mobilityFactor: number
  /** Exact number in a sealed terminal; null elsewhere. */
  number: number | null
}

/** A scenario compiled to voxels, steps and per-step probabilities. Pure data: posted to workers as it is. */
export interface WalkPlan {
  supply: 'stirred' | 'held' | 'sealed'
  crowding: 'independent' | 'exclusive'
  /** Inner voxels per axis (all 0 when stirred). Padded arrays have (nx+2)(ny+2)(nz+2) entries, index p = (z·PY + y)·PX + x over padded coordinates. */
  nx: number
  ny: number
  nz: number
  /** Per padded voxel: 0 free, 1 reflecting, 2 wall or plate that carries sites, 3 outer voxel that exchanges with the bath. */
  flags: Uint8Array
  /** site number behind padded voxel p for a hop of direction d (+x −x +y −y +z −z) at [6p + d], or −1. */
  siteBehind: Int32Array
  /** Padded index of the voxel in front of each site (−1 when stirred). */
  voxelOfSite: Int32Array
  freeVoxels: number
  siteCount: number
  classOfSite: Uint8Array
  /** Realised sites per class (largest remainder). */
  sitesPerClass: number[]
  /** Δt = a²/(6D) [s]. */
  stepS: number
  steps: number
  /** Step indices at which the filled count is read, strictly increasing, the first is 0; time = index · stepS. */
  sampleSteps: Uint32Array
  /** ρa³ [1]. */
  occupancy: number
  vesicles: PlanVesicle[]
  /** attachProbability × attachFactor, [site class][vesicle class] [1]. */
  attachProbability: number[][]
  /** Chance that a filled site is filled at the start [1]. */
  initialFill: number
  /** Later releases: before step `step` is taken each filled (ready) site empties with this probability. */
  releases: { step: number, fraction: number }[]
  /** Chance per step that a filled site lets go, per site class [1]. */
  detachPerStep: number[]
  /** Chance per step that a captured vesicle becomes ready, per site class; null = ready at once. */
  readyPerStep: (number | null)[]
  /** Factor on every attachment probability: restFactor + (1−restFactor)·perStep^k, k steps since the last release. */
  decline: { restFactor: number, perStep: number } | null
  /** Width of a bin of the first-attachment histogram [steps]. */
  histogramBinSteps: number
  histogramBins: number
}

/**
 * Integers that a run of replicates [from, to) leaves behind. Everything that an outcome says is made from blocks alone.
 * Filled includes the sites filled at the start. Exposure: every empty site adds 1 a step, the step of its attachment included.
 */
export interface ReplicateBlock {
  from: number
  to: number
  /** Σ over replicates of filled sites, [site class][sample]. */
  filledSum: number[][]
  /** Σ of squares of the same. */
  filledSumSq: number[][]
  /** Σ of squares of the filled sites of all classes together, [sample]; only with two site classes. */
  totalSumSq?: number[]
  /** The same for ready sites; only where a class has readyPerS. */
  readySum?: number[][]
  readySumSq?: number[][]
  /** First attachments of sites, binned by step of attachment (1-based step n falls in bin floor((n−1)/histogramBinSteps)). */
  firstAttachment: number[]
  /** Attachments, [site class][replicate − from]. */
  events: number[][]
  /** Empty site-steps, [site class][replicate − from]. */
  exposureSteps: number[][]
  /** Under decline: Σ over empty site-steps of floor(factor · 65536), [site class][replicate − from]. */
  declinedExposure?: number[][]
}
