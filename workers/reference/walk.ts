/**
 * The walk in plain TypeScript: every vesicle, every step, written for reading. It is the oracle of the kernel's tests;
 * the order of its draws is the kernel's contract (workers/kernel/README.md).
 */
import { stirredChance } from '../../shared/walk/chances'
import { stateOf, Stream } from '../../shared/walk/streams'
import type { ReplicateBlock, WalkPlan } from '../../shared/walk/types'
import { KERNEL_VERSION } from '../kernel/version'
import type { Kernel } from '../protocol'
import { Sites } from './sites'
import { BlockTally } from './tally'
import { surroundingsOf, Vesicles, type Surroundings } from './vesicles'

function fillStirred(plan: WalkPlan, sites: Sites, stream: Stream, n: number): void {
  const chances = plan.sitesPerClass.map((_, siteClass) => stirredChance(plan, siteClass) * sites.factor)
  for (const site of sites.sites)
    if (site.state === 'empty' && stream.chance(chances[site.siteClass]!)) sites.attach(site, sites.drawOccupant(), n)
}

function walkReplicate(plan: WalkPlan, around: Surroundings | null, stream: Stream, tally: BlockTally, replicate: number): void {
  const sites = new Sites(plan, stream, tally, replicate)
  const vesicles = around && new Vesicles(plan, around, stream)
  const letGo = (site: number, occupant: number) => vesicles?.enter(occupant, plan.voxelOfSite[site]!)
  const blocked = (site: number) => vesicles?.isTaken(plan.voxelOfSite[site]!) ?? false
  for (let n = 0; ; n++) {
    sites.sampleAt(n)
    if (n === plan.steps) return
    if (!sites.beginStep(n, letGo, blocked)) return sites.sampleRest()
    if (vesicles) {
      vesicles.move(sites, n)
      vesicles.letIn()
    } else fillStirred(plan, sites, stream, n)
  }
}

/**
 * Walks replicates [from, to) step by step, or from the stirred supply.
 * @param plan - compiled plan
 * @param seedLow - low word of the seed [1]
 * @param seedHigh - high word of the seed [1]
 * @param from - first replicate
 * @param to - end, exclusive
 * @returns the block that the kernel's `step` or `stirred` must leave bit for bit
 */
export function walkReference(plan: WalkPlan, seedLow: number, seedHigh: number, from: number, to: number): ReplicateBlock {
  const tally = new BlockTally(plan, from, to)
  const around = plan.supply === 'stirred' ? null : surroundingsOf(plan)
  for (let replicate = from; replicate < to; replicate++)
    walkReplicate(plan, around, new Stream(stateOf(seedLow, seedHigh, replicate)), tally, replicate)
  return tally.finish()
}

/** The plain walk behind the kernel's protocol, for suites that run on both. */
export const referenceKernel: Kernel = {
  version: KERNEL_VERSION,
  prepare: (plan, algorithm) => ({
    algorithm, tableBytes: 0, landingError: 0,
    exportTables: () => null,
    adoptTables: () => {},
    run: (low, high, from, to) => walkReference(plan, low, high, from, to),
  }),
}
