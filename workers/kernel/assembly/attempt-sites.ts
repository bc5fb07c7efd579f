// Sites of one replicate under the attempt sampler: start, release, letting go and readiness, each by its own list of steps.
import { DIGIT_CELLS, pickFromRow } from './alias'
import { draw, drawChance } from './attempt-draws'
import { Attempt } from './attempt-plan'
import { noteEmptied, noteRipened, startFilled } from './attempt-tally'
import { Plan } from './plan'
import { CAPTURED, EMPTY, READY } from './sites'

let plan: Plan = changetype<Plan>(0)
let attempt: Attempt = changetype<Attempt>(0)
/** Captured vesicles that are not ready yet. */
export let waiting: i32 = 0
/** Empty sites that some vesicle can attach to. */
export let open: i32 = 0
/** Vesicles in memory. */
export let vesicleCount: i32 = 0

export function setVesicleCount(count: i32): void {
  vesicleCount = count
}

@inline
export function classOf(site: i32): i32 {
  return <i32>load<u8>(plan.classOfSite + <usize>site)
}

@inline
function recordOf(vesicle: i32): usize {
  return attempt.vesicles + (<usize>vesicle << 3)
}

function canAttach(site: i32): bool {
  const at = attempt.accepts + (<usize>site << 3)
  return load<f64>(at) > 0 || (plan.vesicleClasses == 2 && load<f64>(at + (<usize>plan.siteCount << 3)) > 0)
}

/** Steps until something that has a fixed chance a step: 1 + a geometric number, from its base-256 digits. */
function steps(digits: usize, siteClass: i32): i32 {
  const rows = digits + <usize>siteClass * 3072
  let sum = 1
  for (let digit = 0; digit < 3; digit++)
    sum += <i32>pickFromRow(rows + (<usize>digit << 10), DIGIT_CELLS, draw()) << (8 * digit)
  return sum
}

function push(heads: usize, step: i32, vesicle: i32): void {
  const head = heads + (<usize>step << 2)
  store<i32>(recordOf(vesicle), load<i32>(head))
  store<i32>(head, vesicle)
}

/** Plans what a sitting vesicle does after step n: it becomes ready unless it lets go before, and lets go. */
export function settleVesicle(vesicle: i32, site: i32, siteClass: i32, n: i32, ready: bool): void {
  store<i32>(attempt.sitters + (<usize>site << 2), vesicle)
  const leaves = plan.detach(siteClass) > 0 ? n + steps(attempt.detachDigits, siteClass) : i32.MAX_VALUE
  if (attempt.leaving != 0) store<i32>(attempt.leaving + (<usize>vesicle << 2), leaves)
  if (!ready) {
    waiting++
    const ripe = n + steps(attempt.readyDigits, siteClass)
    if (ripe < leaves) {
      if (ripe < plan.steps) push(attempt.ripenings, ripe, vesicle)
      return
    }
  }
  if (leaves < plan.steps) push(attempt.detachments, leaves, vesicle)
}

/** A vesicle that has a site from the start needs a record where it can let go. */
function startVesicle(site: i32, siteClass: i32): void {
  const second = plan.vesicleClasses == 2 && !drawChance(plan.firstOccupant)
  if (plan.detach(siteClass) <= 0) return
  const vesicle = vesicleCount++
  store<u32>(recordOf(vesicle) + 4, <u32>site | (second ? 0x10000 : 0))
  settleVesicle(vesicle, site, siteClass, -1, true)
}

/** Starts a replicate: all empty, then each site filled (and ready) with probability initialFill. */
export function openAttemptSites(openedPlan: Plan, openedAttempt: Attempt): void {
  plan = openedPlan
  attempt = openedAttempt
  waiting = open = 0
  memory.fill(plan.siteState, 0, plan.siteCount)
  memory.fill(plan.attachedOnce, 0, plan.siteCount)
  memory.fill(attempt.sitters, 0xFF, <usize>plan.siteCount << 2)
  for (let site = 0; site < plan.siteCount; site++) {
    if (plan.initialFill > 0 && drawChance(plan.initialFill)) {
      const siteClass = classOf(site)
      store<u8>(plan.siteState + <usize>site, READY)
      store<u8>(plan.attachedOnce + <usize>site, 1)
      startFilled(siteClass)
      startVesicle(site, siteClass)
    } else if (canAttach(site)) open++
  }
}

export function closeSite(): void {
  open--
}

function emptySite(site: i32, n: i32): void {
  const ready = load<u8>(plan.siteState + <usize>site) == READY
  if (!ready) waiting--
  store<u8>(plan.siteState + <usize>site, EMPTY)
  store<i32>(attempt.sitters + (<usize>site << 2), -1)
  if (canAttach(site)) open++
  noteEmptied(classOf(site), n, ready)
}

/** Each ready site empties with this probability; its vesicle leaves the terminal. */
export function releaseSites(fraction: f64, n: i32): void {
  for (let site = 0; site < plan.siteCount; site++)
    if (load<u8>(plan.siteState + <usize>site) == READY && drawChance(fraction)) emptySite(site, n)
}

/** True when the vesicle of this record still sits at its site; then the site is emptied before step n. */
export function letGo(vesicle: i32, site: i32, n: i32): bool {
  if (load<i32>(attempt.sitters + (<usize>site << 2)) != vesicle) return false
  emptySite(site, n)
  return true
}

/** Captured vesicles whose readiness falls on step n; then they wait to let go. */
export function ripenSites(n: i32): void {
  let vesicle = load<i32>(attempt.ripenings + (<usize>n << 2))
  while (vesicle >= 0) {
    const record = recordOf(vesicle)
    const following = load<i32>(record)
    const site = <i32>load<u16>(record, 4)
    store<u8>(plan.siteState + <usize>site, READY)
    waiting--
    noteRipened(classOf(site), n)
    const leaves = attempt.leaving != 0 ? load<i32>(attempt.leaving + (<usize>vesicle << 2)) : i32.MAX_VALUE
    if (leaves < plan.steps) push(attempt.detachments, leaves, vesicle)
    vesicle = following
  }
}
