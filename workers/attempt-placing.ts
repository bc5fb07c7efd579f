/** Writes what the attempt sampler reads besides the plan: classes, arrivals, acceptance, decline, and its working memory. */
import { attemptCeiling } from '../shared/walk/attempt-size'
import type { WalkPlan } from '../shared/walk/types'
import { makeArrivals } from './attempt-arrivals'
import { attemptExports, Scratch } from './attempt-kernel'
import type { TableSet } from './attempt-tables'
import type { KernelHost } from './host'

const WORD = 4294967296

/** Per site the addresses of what its class of starts and its mirror lead to: waiting row, landing rows, order, mirror. */
function startAddresses(host: KernelHost, set: TableSet): Uint32Array {
  const { pointer, offsets, sites } = set, classOf = new Uint16Array(host.bytes(pointer + offsets.classOf, 2 * sites).slice().buffer), mirrorOf = host.bytes(pointer + offsets.mirrorOf, sites)
  const addresses = new Uint32Array(4 * sites)
  classOf.forEach((kind, site) => addresses.set([
    pointer + offsets.waits + 4 * kind * (set.waitSteps + 3), pointer + offsets.rows + 16 * kind * set.bins,
    pointer + offsets.order + 2 * kind * sites, pointer + offsets.mirrors + 2 * mirrorOf[site]! * sites,
  ], 4 * site))
  return addresses
}

/** AttemptClass, field by field; zeros where the class never attaches. */
function classWords(host: KernelHost, scratch: Scratch, plan: WalkPlan, vesicleClass: number, set: TableSet | null): { words: number[], most: number } {
  if (!set) return { words: Array<number>(23).fill(0), most: 0 }
  const at = (section: keyof TableSet['offsets']) => set.pointer + set.offsets[section]
  const arrivals = makeArrivals(host, scratch, plan, vesicleClass, set)
  const { counts } = arrivals, table = new Uint32Array(258 + counts.thresholds.length)
  table.set([counts.first, counts.thresholds.length - 1])
  table.set(counts.guide, 2)
  table.set(counts.thresholds, 258)
  return {
    most: arrivals.most,
    words: [
      at('waits'), set.waitSteps, at('binOf'), set.landingSteps, at('rows'), 2 * set.bins, at('cells'), at('order'),
      at('classOf'), at('mirrorOf'), at('mirrors'), at('members'), at('memberCounts'), at('digits'), set.lateDigits,
      scratch.place(table), arrivals.kinds, arrivals.kindCount, arrivals.early, arrivals.earlySteps, arrivals.tailBlocks, arrivals.tailBlockCount, scratch.place(startAddresses(host, set)),
    ],
  }
}

/** Chance that an effective attempt attaches, [vesicle class][site], times 2^32. */
function acceptances(plan: WalkPlan): Float64Array {
  const accepts = new Float64Array(plan.vesicles.length * plan.siteCount)
  plan.vesicles.forEach((vesicle, v) => {
    const ceiling = vesicle.mobilityFactor > 0 ? attemptCeiling(plan, vesicle.mobilityFactor) : 0
    for (let site = 0; ceiling > 0 && site < plan.siteCount; site++)
      accepts[v * plan.siteCount + site] = plan.attachProbability[plan.classOfSite[site]!]![v]! / ceiling * WORD
  })
  return accepts
}

/** Decline by step, with the very products of the step-by-step walk: factor in each step, and floor(65536·factor) summed before it. */
function declineOf(plan: WalkPlan): { factors: Float64Array, before: Float64Array } | null {
  if (!plan.decline) return null
  const { restFactor, perStep } = plan.decline
  const factors = new Float64Array(plan.steps), before = new Float64Array(plan.steps + 1), restarts = new Set(plan.releases.map(one => one.step))
  for (let n = 0, power = 1; n < plan.steps; n++, power *= perStep) {
    if (restarts.has(n)) power = 1
    factors[n] = restFactor + (1 - restFactor) * power
    before[n + 1] = before[n]! + Math.floor(factors[n]! * 65536)
  }
  return { factors, before }
}

/** Digit rows of the steps until an event of each site class; 0 where no class has one. */
function digitRows(host: KernelHost, scratch: Scratch, chances: (number | null)[]): number {
  if (!chances.some(chance => chance !== null && chance > 0)) return 0
  const cells = scratch.room(3072 * chances.length), room = host.allocate(4096)
  chances.forEach((chance, i) => {
    if (chance !== null && chance > 0) attemptExports(host).geometricRows(1 - Math.max(chance, 1e-12), 3, cells + 3072 * i, room)
  })
  host.release(room)
  return cells
}

/**
 * Writes the sampler's argument.
 * @param host - the kernel
 * @param plan - compiled plan
 * @param sets - tables by vesicle class; null for one that never attaches
 * @returns its address and the owner of all memory behind it
 */
export function placeAttempt(host: KernelHost, plan: WalkPlan, sets: (TableSet | null)[]): { pointer: number, scratch: Scratch } {
  const scratch = new Scratch(host)
  const classes = [0, 1].map(i => classWords(host, scratch, plan, i, sets[i] ?? null))
  const detaches = plan.detachPerStep.some(chance => chance > 0), ripens = plan.readyPerStep.some(chance => chance !== null)
  const capacity = classes[0]!.most + classes[1]!.most + plan.siteCount, heads = 4 * plan.steps, decline = declineOf(plan)
  const pointer = scratch.words([
    scratch.words(classes[0]!.words), scratch.words(classes[1]!.words),
    scratch.room(heads), ripens ? scratch.room(heads) : 0, detaches ? scratch.room(heads) : 0,
    scratch.room(8 * capacity), capacity, scratch.room(4 * plan.siteCount), scratch.place(acceptances(plan)),
    decline ? scratch.place(decline.factors) : 0, decline ? scratch.place(decline.before) : 0, scratch.room(1024),
    digitRows(host, scratch, plan.detachPerStep), digitRows(host, scratch, plan.readyPerStep),
    detaches ? scratch.room(4 * capacity) : 0,
  ])
  return { pointer, scratch }
}
