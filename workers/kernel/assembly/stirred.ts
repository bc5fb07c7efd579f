/** Walk from a stirred supply: the closed form's own assumption. Each empty site attaches with probability (rho a^3 / 6) x sum(share x mobility x p) per step. */
import { Plan } from './plan'
import { chance, chanceLeft, s0, s1, s2, s3, seedStream, storeState } from './rng'
import { attachAt, beginStep, countSites, drawOccupant, EMPTY, factor, openSites, sampleAt, sampleRest, stateOfSite } from './sites'
import { openTally } from './tally'

/** One step the plain way. */
function fillCertain(plan: Plan, n: i32, p0: f64, p1: f64): void {
  for (let site = 0; site < plan.siteCount; site++) {
    if (stateOfSite(site) != EMPTY) continue
    const siteClass = <i32>load<u8>(plan.classOfSite + site)
    if (chance(siteClass == 0 ? p0 : p1)) attachAt(site, siteClass, drawOccupant(), n)
  }
}

/**
 * One step: each empty site in order holds one draw against its class's chance, as `chance` does; the thresholds are worked out once,
 * and the stream stays in locals while nothing attaches. A chance of 0 or 1 takes no draw: such steps go the plain way.
 */
function fillStep(plan: Plan, n: i32): void {
  const p0 = plan.stirred0 * factor, p1 = plan.stirred1 * factor, two = plan.siteClasses == 2
  if (p0 <= 0 || p0 >= 1 || (two && (p1 <= 0 || p1 >= 1))) {
    fillCertain(plan, n, p0, p1)
    return
  }
  const limit0 = <u32>(p0 * 4294967296), limit1 = two ? <u32>(p1 * 4294967296) : 0
  const states = plan.siteState, classes = plan.classOfSite
  let a = s0, b = s1, c = s2, d = s3
  for (let site = 0, end = plan.siteCount; site < end; site++) {
    // Sixteen filled sites are passed over at once: late in a run most are.
    while (site + 16 <= end && i8x16.all_true(v128.load(states + site))) site += 16
    if (site == end) break
    if (load<u8>(states + site) != EMPTY) continue
    const siteClass = <i32>load<u8>(classes + site), limit = select(limit0, limit1, siteClass == 0)
    const r = rotl<u32>(a + d, 7) + a, shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotl<u32>(d, 11)
    if (r > limit) continue
    storeState(a, b, c, d)
    if (r < limit || chanceLeft(siteClass == 0 ? p0 : p1)) attachAt(site, siteClass, drawOccupant(), n)
    a = s0
    b = s1
    c = s2
    d = s3
  }
  storeState(a, b, c, d)
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
