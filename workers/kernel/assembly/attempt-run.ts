// Walks replicates from one effective attempt to the next: two draws a jump, one more where a site is empty.
import { DIGIT_CELLS, pickFromRow } from './alias'
import { brink, cursor, draw, openDraws, refill, setCursor } from './attempt-draws'
import { Attempt, AttemptClass } from './attempt-plan'
import { classOf, closeSite, letGo, open, openAttemptSites, releaseSites, ripenSites, setVesicleCount, settleVesicle, vesicleCount, waiting } from './attempt-sites'
import { closeChanges, closeReplicate, noteAttachment, openChanges, openReplicate } from './attempt-tally'
import { LATE_CELLS } from './attempt-tables'
import { CountTable, Plan } from './plan'
import { seedStream } from './rng'
import { CAPTURED, EMPTY, READY } from './sites'

/** Second vesicle class in a record's code. */
const SECOND: u32 = 0x10000
/** Kinds of first attempts. */
const EARLY: u32 = 0
const EVEN: u32 = 1

@inline
function push(heads: usize, step: i32, record: usize, vesicle: i32): void {
  const head = heads + (<usize>step << 2)
  store<i32>(record, load<i32>(head))
  store<i32>(head, vesicle)
}

/** A wait beyond the explicit steps: pairs of steps by digits, after the first of its parity. `at` is the first of its draws. */
function lateWait(kind: AttemptClass, waited: i32, at: usize): i32 {
  let pairs = 0
  for (let digit = 0; digit < kind.lateDigitCount; digit++)
    pairs += <i32>pickFromRow(kind.lateDigits + (<usize>digit << 10), DIGIT_CELLS, load<u32>(at + (<usize>digit << 2))) << (8 * digit)
  return waited + 1 + 2 * pairs
}

/** Sends a vesicle from its site, after an attempt at step `origin`, to its next attempt. Returns where the draws have come to. */
@inline
function jump(attempt: Attempt, kind: AttemptClass, stepCount: i32, vesicle: i32, record: usize, code: u32, origin: i32, draws: usize): usize {
  const start = kind.starts + (<usize>(code & 0xFFFF) << 4)
  const waitSteps = kind.waitSteps
  const waited = <i32>pickFromRow(<usize>load<u32>(start), <u32>(waitSteps + LATE_CELLS), load<u32>(draws))
  let at = draws + 4
  let wait = waited + 1
  if (wait > waitSteps) {
    if (wait == waitSteps + LATE_CELLS) return at
    wait = lateWait(kind, waited, at)
    at += <usize>kind.lateDigitCount << 2
  }
  const step = origin + wait
  if (step >= stepCount) return at
  const bin = <u32>load<u8>(kind.binOf + <usize>min(wait, kind.landingSteps))
  const row = <usize>load<u32>(start, 4) + (<usize>((bin << 1) + (<u32>wait & 1)) << 3)
  const rank = pickFromRow(kind.cells + (<usize>load<u32>(row) << 2), load<u32>(row, 4), load<u32>(at))
  const image = <u32>load<u16>(<usize>load<u32>(start, 8) + (<usize>rank << 1))
  const landed = <u32>load<u16>(<usize>load<u32>(start, 12) + (<usize>image << 1))
  store<u32>(record, landed | (code & SECOND), 4)
  push(attempt.attempts, step, record, vesicle)
  return at + 4
}

/** Draws the vesicles of one class that ever attempt, and puts each at its first attempt. */
function arrive(plan: Plan, attempt: Attempt, kind: AttemptClass, code: u32): void {
  if (kind.kindCount == 0) return
  const table = changetype<CountTable>(kind.counts)
  const count = min(drawTable(table), attempt.capacity - plan.siteCount - vesicleCount)
  const first = vesicleCount
  const earlySteps = kind.earlySteps, stepCount = plan.steps
  const tailBlocks = kind.tailBlocks, tailBlockCount = <u32>kind.tailBlockCount, lateDigits = kind.lateDigits
  let at = cursor
  for (let vesicle = first; vesicle < first + count; vesicle++) {
    if (at > brink) {
      refill(at)
      at = cursor
    }
    const picked = pickFromRow(kind.kinds, kind.kindCount, load<u32>(at))
    const start = picked >> 2
    const type = picked & 3
    let step: i32
    if (type == EARLY) step = pickFromRow(kind.early + (<usize>(start * <u32>earlySteps) << 2), earlySteps, load<u32>(at + 4))
    else if (type == EVEN) step = earlySteps + <i32>((<u64>load<u32>(at + 4) * <u64>(stepCount - earlySteps)) >> 32)
    else {
      // In the exponential tail, by block and place in the block; drawn again when past the end.
      const first = earlySteps + <i32>type - 2
      do {
        if (at > brink) {
          refill(at)
          at = cursor
        }
        const block = <i32>pickFromRow(tailBlocks, tailBlockCount, load<u32>(at + 4))
        step = first + 2 * ((block << 8) + <i32>pickFromRow(lateDigits, DIGIT_CELLS, load<u32>(at + 8)))
        at += 8
      } while (step >= stepCount)
      at -= 4
    }
    const members = <u64>load<u16>(kind.memberCounts + (<usize>start << 1))
    const member = <u32>((<u64>load<u32>(at + 8) * members) >> 32)
    at += 12
    const record = attempt.vesicles + (<usize>vesicle << 3)
    store<u32>(record, <u32>load<u16>(kind.members + (<usize>((start << 3) + member) << 1)) | code, 4)
    push(attempt.attempts, step, record, vesicle)
  }
  setCursor(at)
  setVesicleCount(first + count)
}

function drawTable(table: CountTable): i32 {
  const value = draw()
  const thresholds = changetype<usize>(table) + offsetof<CountTable>()
  let k = load<u32>(thresholds + (<usize>(value >>> 24) << 2))
  while (<i32>k < table.last && value >= load<u32>(thresholds + 1024 + (<usize>k << 2))) k++
  return table.first + <i32>k
}

/** Vesicles that let go before step n start again from in front of their site. */
function detachAt(plan: Plan, attempt: Attempt, n: i32): void {
  let vesicle = load<i32>(attempt.detachments + (<usize>n << 2))
  while (vesicle >= 0) {
    const record = attempt.vesicles + (<usize>vesicle << 3)
    const following = load<i32>(record)
    const code = load<u32>(record, 4)
    if (letGo(vesicle, <i32>(code & 0xFFFF), n)) {
      const kind = changetype<AttemptClass>(code & SECOND ? attempt.class1 : attempt.class0)
      if (kind.kindCount > 0) {
        if (cursor > brink) refill(cursor)
        setCursor(jump(attempt, kind, plan.steps, vesicle, record, code, n - 1, cursor))
      }
    }
    vesicle = following
  }
}

/** An attachment in step n. */
function attach(plan: Plan, vesicle: i32, site: i32, n: i32): void {
  const siteClass = classOf(site)
  const ready = plan.ready(siteClass) < 0
  const first = load<u8>(plan.attachedOnce + <usize>site) == 0
  store<u8>(plan.attachedOnce + <usize>site, 1)
  store<u8>(plan.siteState + <usize>site, ready ? READY : CAPTURED)
  closeSite()
  noteAttachment(siteClass, n, first, ready)
  if (!ready || plan.detach(siteClass) > 0) settleVesicle(vesicle, site, siteClass, n, ready)
}

/** The attempts of step n, in the order of its list. */
@inline
function attemptsAt(plan: Plan, attempt: Attempt, class0: AttemptClass, class1: AttemptClass, siteCount: u32, stepCount: i32, n: i32, factor: f64): void {
  const accepts = attempt.accepts
  const states = plan.siteState
  let vesicle = load<i32>(attempt.attempts + (<usize>n << 2))
  if (vesicle < 0) return
  let at = cursor
  while (vesicle >= 0) {
    const record = attempt.vesicles + (<usize>vesicle << 3)
    const following = load<i32>(record)
    const code = load<u32>(record, 4)
    if (at > brink) {
      refill(at)
      at = cursor
    }
    const site = code & 0xFFFF
    const second = (code & SECOND) != 0
    let stays = false
    if (load<u8>(states + <usize>site) == EMPTY) {
      const accept = load<f64>(accepts + (<usize>(second ? siteCount + site : site) << 3))
      stays = <f64>load<u32>(at) < accept * factor
      at += 4
    }
    if (stays) {
      setCursor(at)
      attach(plan, vesicle, site, n)
      at = cursor
    } else at = jump(attempt, second ? class1 : class0, stepCount, vesicle, record, code, n, at)
    vesicle = following
  }
  setCursor(at)
}

/** One replicate, to its end or until nothing can change any more. */
function walkReplicate(plan: Plan, attempt: Attempt): void {
  const class0 = changetype<AttemptClass>(attempt.class0)
  const class1 = changetype<AttemptClass>(attempt.class1)
  const stepCount = plan.steps
  const siteCount = <u32>plan.siteCount
  let releases = 0
  for (let n = 0; n < stepCount; n++) {
    while (releases < plan.releases && load<i32>(plan.releaseSteps + (<usize>releases << 2)) == n) {
      releaseSites(load<f64>(plan.releaseFractions + (<usize>releases << 3)), n)
      releases++
    }
    if (attempt.detachments != 0) detachAt(plan, attempt, n)
    if (attempt.ripenings != 0) ripenSites(n)
    if (open == 0 && releases == plan.releases && attempt.detachments == 0) {
      if (waiting == 0) break
      continue
    }
    const factor = attempt.factors == 0 ? 1 : load<f64>(attempt.factors + (<usize>n << 3))
    attemptsAt(plan, attempt, class0, class1, siteCount, stepCount, n, factor)
  }
}

/** Walks replicates [from, to). */
export function walkAttempt(plan: Plan, pointer: usize, tally: usize, low: u32, high: u32, from: i32, to: i32): void {
  const attempt = changetype<Attempt>(pointer)
  const bytes = <usize>plan.steps << 2
  let sites1 = 0
  for (let site = 0; site < plan.siteCount; site++) sites1 += <i32>load<u8>(plan.classOfSite + <usize>site)
  openChanges(plan, tally, to - from, attempt.declinedBefore)
  for (let replicate = from; replicate < to; replicate++) {
    memory.fill(attempt.attempts, 0xFF, bytes)
    if (attempt.ripenings != 0) memory.fill(attempt.ripenings, 0xFF, bytes)
    if (attempt.detachments != 0) memory.fill(attempt.detachments, 0xFF, bytes)
    seedStream(low, high, replicate)
    openDraws(attempt.draws)
    openReplicate(replicate - from)
    setVesicleCount(0)
    openAttemptSites(plan, attempt)
    arrive(plan, attempt, changetype<AttemptClass>(attempt.class0), 0)
    if (plan.vesicleClasses == 2) arrive(plan, attempt, changetype<AttemptClass>(attempt.class1), SECOND)
    walkReplicate(plan, attempt)
    closeReplicate(plan.siteCount - sites1, sites1)
  }
  closeChanges()
}
