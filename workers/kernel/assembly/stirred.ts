/** Walk from a stirred supply: the closed form's own assumption. Each empty site attaches with probability (rho a^3 / 6) x sum(share x mobility x p) per step. */
import { Plan } from './plan'
import { chance, seedStream } from './rng'
import { attachAt, beginStep, countSites, drawOccupant, EMPTY, factor, openSites, sampleAt, sampleRest, stateOfSite } from './sites'
import { openTally } from './tally'

function fillStep(plan: Plan, n: i32): void {
  const p0 = plan.stirred0 * factor, p1 = plan.stirred1 * factor
  for (let site = 0; site < plan.siteCount; site++) {
    if (stateOfSite(site) != EMPTY) continue
    const siteClass = <i32>load<u8>(plan.classOfSite + site)
    if (chance(siteClass == 0 ? p0 : p1)) attachAt(site, siteClass, drawOccupant(), n)
  }
}

/** Walks replicates [from, to). */
export function walkStirred(plan: Plan, tally: usize, low: u32, high: u32, from: i32, to: i32): void {
  openTally(plan, tally, to - from)
  countSites(plan)
  for (let replicate = from; replicate < to; replicate++) {
    seedStream(low, high, replicate)
    openSites(plan, replicate - from)
    for (let n = 0; ; n++) {
      sampleAt(n)
      if (n == plan.steps) break
      if (!beginStep(n)) {
        sampleRest()
        break
      }
      fillStep(plan, n)
    }
  }
}
