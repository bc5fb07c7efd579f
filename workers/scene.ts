/** One replicate of the step-by-step walk for the eye, and the mean density around a ribbon: what the terminal's pictures show. */
import type { Scenario } from '../shared/schemas/scenario'
import { hopOffsets, FLAG } from '../shared/walk/geometry'
import { voxelCounts } from '../shared/walk/frame'
import { compilePlan } from '../shared/walk/plan'
import { seedWords, stateOf, Stream } from '../shared/walk/streams'
import type { WalkPlan } from '../shared/walk/types'
import { Sites } from './reference/sites'
import { BlockTally } from './reference/tally'
import { surroundingsOf, Vesicles } from './reference/vesicles'

/** More vesicles than these can be neither drawn nor stepped smoothly. */
export const SCENE_VESICLES = 20_000
const SCENE_VOXELS = 2_000_000

export interface ScenePlace {
  /** Inner voxels per axis. */
  size: [number, number, number]
  stepS: number
  steps: number
  spacingNm: number
  /** Inner voxel in front of each site, [3i + axis], and the way from it to the site: +1 or −1 along z. */
  sites: Int16Array
  siteSides: Int8Array
  classOfSite: Uint8Array
  /** Inner voxel z of the plate, or −1 where the sites lie in the wall. */
  plateLayer: number
}
export interface SceneFrame {
  step: number
  timeS: number
  /** Inner voxel of every free vesicle, [3k + axis]. */
  vesicles: Int16Array
  /** 0 empty, 1 captured, 2 ready. */
  sites: Uint8Array
  /** The walk has no further step. */
  ended: boolean
}

/** Why a scenario has no picture of single vesicles; null when it has. */
export function sceneRefusal(scenario: Scenario): string | null {
  if (scenario.reservoir.supply === 'stirred') return 'A stirred supply is drawn anew at every step: its vesicles have no places to show.'
  const { voxels, freeVoxels } = voxelCounts(scenario)
  const vesicles = Math.round(freeVoxels * scenario.medium.densityPerUm3 * (scenario.medium.spacingNm / 1000) ** 3)
  if (vesicles > SCENE_VESICLES) return `${vesicles} vesicles are too many to draw; at most ${SCENE_VESICLES}.`
  if (voxels > SCENE_VOXELS) return `${voxels} voxels are too many to draw; at most ${SCENE_VOXELS}.`
  return null
}

const innerOf = (plan: WalkPlan, padded: number): [number, number, number] => {
  const px = plan.nx + 2, py = plan.ny + 2
  return [padded % px - 1, Math.floor(padded / px) % py - 1, Math.floor(padded / (px * py)) - 1]
}

export function placeOf(scenario: Scenario, plan: WalkPlan): ScenePlace {
  const sites = new Int16Array(plan.siteCount * 3), siteSides = new Int8Array(plan.siteCount)
  plan.voxelOfSite.forEach((voxel, i) => {
    sites.set(innerOf(plan, voxel), 3 * i)
    siteSides[i] = plan.siteBehind[6 * voxel + 4] === i ? 1 : -1
  })
  const twoFaces = scenario.ribbon.shape === 'plate' && scenario.ribbon.faces === 2
  return {
    size: [plan.nx, plan.ny, plan.nz], stepS: plan.stepS, steps: plan.steps, spacingNm: scenario.medium.spacingNm, sites, siteSides,
    classOfSite: plan.classOfSite, plateLayer: twoFaces ? sites[2]! + siteSides[0]! : -1,
  }
}

/** The plain walk of one replicate, stepped on demand. The same seed and replicate walk as in a run by “step”. */
export class SceneWalk {
  private readonly sites: Sites
  private readonly vesicles: Vesicles
  private n = 0
  private ended = false

  constructor(readonly plan: WalkPlan, seed: string, replicate = 0) {
    const [low, high] = seedWords(seed)
    const stream = new Stream(stateOf(low, high, replicate))
    this.sites = new Sites(plan, stream, new BlockTally(plan, replicate, replicate + 1), replicate)
    this.vesicles = new Vesicles(plan, surroundingsOf(plan), stream)
  }

  /** Takes so many steps, or as many as are left. */
  advance(steps: number): SceneFrame {
    for (let i = 0; i < steps && !this.ended; i++) this.step()
    return this.frame()
  }

  private step(): void {
    this.sites.sampleAt(this.n)
    const letGo = (site: number, occupant: number) => this.vesicles.enter(occupant, this.plan.voxelOfSite[site]!)
    const blocked = (site: number) => this.vesicles.isTaken(this.plan.voxelOfSite[site]!)
    if (this.n === this.plan.steps || !this.sites.beginStep(this.n, letGo, blocked)) {
      this.ended = true
      return
    }
    this.vesicles.move(this.sites, this.n)
    this.vesicles.letIn()
    this.n++
  }

  private frame(): SceneFrame {
    const all = this.vesicles.lists.flat()
    const places = new Int16Array(all.length * 3)
    all.forEach((voxel, k) => places.set(innerOf(this.plan, voxel), 3 * k))
    const states = { empty: 0, captured: 1, ready: 2 } as const
    return { step: this.n, timeS: this.n * this.plan.stepS, vesicles: places, sites: Uint8Array.from(this.sites.sites, site => states[site.state]), ended: this.ended }
  }
}

export interface DensitySection {
  /** Density over rest in the plane through the middle of the ribbon, [z · nx + x]; NaN inside the plate. */
  values: Float32Array
  width: number
  height: number
  /** Row of voxels that the plane goes through. */
  row: number
  timeS: number
}

/**
 * Mean density around the ribbon some time after the stimulus: the hops of the walk applied to its mean, sites filling by their mean hit rate (mean field: density and emptiness of a site taken as independent).
 * @param plan - compiled plan with a lattice
 * @param timeS - time after the stimulus [s]
 * @returns density over its resting value in the plane through the ribbon's middle row [1]
 */
export function densitySection(plan: WalkPlan, timeS: number): DensitySection {
  const steps = Math.max(1, Math.min(plan.steps, Math.round(timeS / plan.stepS)))
  const offsets = hopOffsets(plan.nx, plan.ny)
  const probability = Array.from(plan.classOfSite, siteClass => meanProbability(plan, siteClass))
  const empty = new Float64Array(plan.siteCount).fill(1 - plan.initialFill)
  let now = Float64Array.from(plan.flags, flag => flag === FLAG.free ? 1 : 0)
  let next = new Float64Array(now.length)
  const free: number[] = []
  plan.flags.forEach((flag, p) => {
    if (flag === FLAG.free) free.push(p)
  })
  for (let n = 0; n < steps; n++) {
    const arrivals = new Float64Array(plan.siteCount)
    next.fill(0)
    for (const p of free) {
      for (let d = 0; d < 6; d++) {
        const target = p + offsets[d]!, flag = plan.flags[target]!
        if (flag === FLAG.free) next[p]! += now[target]! / 6 // symmetric hops: what comes is what the neighbour sends
        else if (flag === FLAG.exchange) next[p]! += 1 / 6
        else {
          const site = flag === FLAG.sites ? plan.siteBehind[6 * p + d]! : -1
          const taken = site < 0 ? 0 : now[p]! / 6 * empty[site]! * probability[site]!
          next[p]! += now[p]! / 6 - taken
          if (site >= 0) arrivals[site]! += taken * plan.occupancy
        }
      }
    }
    arrivals.forEach((arrived, site) => {
      empty[site]! = Math.max(0, empty[site]! - arrived)
    })
    ;[now, next] = [next, now]
  }
  return sectionOf(plan, now, steps)
}

function meanProbability(plan: WalkPlan, siteClass: number): number {
  const weights = plan.vesicles.map(vesicle => vesicle.share * vesicle.mobilityFactor)
  const all = weights.reduce((sum, weight) => sum + weight, 0)
  return all > 0 ? weights.reduce((sum, weight, k) => sum + weight * plan.attachProbability[siteClass]![k]!, 0) / all : 0
}

function sectionOf(plan: WalkPlan, density: Float64Array, steps: number): DensitySection {
  const middle = plan.voxelOfSite[Math.floor(plan.siteCount / 2)]!
  const rows = Array.from(plan.voxelOfSite, voxel => innerOf(plan, voxel)[1])
  const row = plan.siteCount > 0 ? Math.floor((Math.min(...rows) + Math.max(...rows)) / 2) : innerOf(plan, middle)[1]
  const px = plan.nx + 2, py = plan.ny + 2
  const values = new Float32Array(plan.nx * plan.nz)
  for (let z = 0; z < plan.nz; z++)
    for (let x = 0; x < plan.nx; x++) {
      const p = ((z + 1) * py + row + 1) * px + x + 1
      values[z * plan.nx + x] = plan.flags[p] === FLAG.free ? density[p]! : Number.NaN
    }
  return { values, width: plan.nx, height: plan.nz, row, timeS: steps * plan.stepS }
}

/** Compiles a scenario for its pictures; throws the refusal as its message. */
export function scenePlan(scenario: Scenario): WalkPlan {
  const refusal = sceneRefusal(scenario)
  if (refusal !== null) throw new RangeError(refusal)
  return compilePlan(scenario)
}
