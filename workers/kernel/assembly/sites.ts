/** Sites of one replicate: what they hold, what happens to them at the start of a step, and their counts. Shared by all step-wise walks. */
import { Plan } from './plan'
import { chance } from './rng'
import { addAttachment, addExposure, addSample, addTotal } from './tally'
import { enter } from './vesicles'

export const EMPTY: u8 = 0
export const CAPTURED: u8 = 1
export const READY: u8 = 2

let plan: Plan = changetype<Plan>(0)
let replicate: i32 = 0
let filled0: i32 = 0
let filled1: i32 = 0
let notReady: i32 = 0
let ready0: i32 = 0
let ready1: i32 = 0
let sites0: i32 = 0
let sites1: i32 = 0
let nextSample: i32 = 0
let nextRelease: i32 = 0
let detaches: bool = false
/** perStep^k, k steps since the last release. */
let power: f64 = 1
/** Factor on every attachment probability in the current step. */
export let factor: f64 = 1

@inline
function classOf(site: i32): i32 {
  return <i32>load<u8>(plan.classOfSite + site)
}

@inline
export function stateOfSite(site: i32): u8 {
  return load<u8>(plan.siteState + site)
}

function fill(site: i32, siteClass: i32, vesicleClass: i32, state: u8): void {
  store<u8>(plan.siteState + site, state)
  store<u8>(plan.occupant + site, <u8>vesicleClass)
  if (siteClass == 0) filled0++
  else filled1++
  if (state == CAPTURED) notReady++
  else if (siteClass == 0) ready0++
  else ready1++
}

function empty(site: i32, siteClass: i32): void {
  if (stateOfSite(site) == CAPTURED) notReady--
  else if (siteClass == 0) ready0--
  else ready1--
  store<u8>(plan.siteState + site, EMPTY)
  if (siteClass == 0) filled0--
  else filled1--
}

/** Class of an occupant that the walk does not tell; a draw only with two vesicle classes. */
export function drawOccupant(): i32 {
  return plan.vesicleClasses == 1 || chance(plan.firstOccupant) ? 0 : 1
}

/** Starts a replicate: all empty, then each site filled (and ready) with probability initialFill. */
export function openSites(opened: Plan, replicateOfRun: i32): void {
  plan = opened
  replicate = replicateOfRun
  filled0 = filled1 = ready0 = ready1 = notReady = nextSample = nextRelease = 0
  power = 1
  detaches = opened.detach0 > 0 || (opened.siteClasses == 2 && opened.detach1 > 0)
  memory.fill(opened.siteState, 0, opened.siteCount)
  memory.fill(opened.attachedOnce, 0, opened.siteCount)
  if (opened.initialFill <= 0) return
  for (let site = 0; site < opened.siteCount; site++) {
    if (!chance(opened.initialFill)) continue
    fill(site, classOf(site), drawOccupant(), READY)
    store<u8>(opened.attachedOnce + site, 1)
  }
}

/** Attachment of a vesicle in step n. */
export function attachAt(site: i32, siteClass: i32, vesicleClass: i32, n: i32): void {
  const first = load<u8>(plan.attachedOnce + site) == 0
  store<u8>(plan.attachedOnce + site, 1)
  fill(site, siteClass, vesicleClass, plan.ready(siteClass) >= 0 ? CAPTURED : READY)
  addAttachment(siteClass, replicate, n, first)
}

/** Reads the filled count if a sample falls on index n. */
export function sampleAt(n: i32): void {
  if (nextSample < plan.samples && load<u32>(plan.sampleSteps + (nextSample << 2)) == <u32>n) takeSample()
}

function takeSample(): void {
  addSample(0, nextSample, filled0, ready0)
  if (plan.siteClasses == 2) {
    addSample(1, nextSample, filled1, ready1)
    addTotal(nextSample, filled0 + filled1)
  }
  nextSample++
}

/** Nothing can change any more: reads all samples that are left. */
export function sampleRest(): void {
  while (nextSample < plan.samples) takeSample()
}

function release(fraction: f64): void {
  for (let site = 0; site < plan.siteCount; site++)
    if (stateOfSite(site) == READY && chance(fraction)) empty(site, classOf(site))
}

/** A filled site lets go: its vesicle stands in front of it again. Under exclusion it waits (no draw) while that voxel is taken. */
function detach(): void {
  for (let site = 0; site < plan.siteCount; site++) {
    if (stateOfSite(site) == EMPTY) continue
    const siteClass = classOf(site), p = plan.detach(siteClass)
    if (p <= 0) continue
    if (plan.supply == 0) {
      if (chance(p)) empty(site, siteClass)
      continue
    }
    const voxel = load<i32>(plan.voxelOfSite + (site << 2))
    if (plan.exclusive != 0 && load<u8>(plan.cells + voxel) != 0) continue
    if (!chance(p)) continue
    empty(site, siteClass)
    enter(plan, <i32>load<u8>(plan.occupant + site), voxel)
  }
}

function ripen(): void {
  for (let site = 0; site < plan.siteCount; site++) {
    if (stateOfSite(site) != CAPTURED) continue
    const siteClass = classOf(site)
    if (!chance(plan.ready(siteClass))) continue
    store<u8>(plan.siteState + site, READY)
    notReady--
    if (siteClass == 0) ready0++
    else ready1++
  }
}

/** Sites per class never change within a plan; counted once per run. */
export function countSites(opened: Plan): void {
  sites0 = sites1 = 0
  for (let site = 0; site < opened.siteCount; site++) {
    if (load<u8>(opened.classOfSite + site) == 0) sites0++
    else sites1++
  }
}

/**
 * Everything that happens at index n before vesicles move: releases, detachment, readiness, decline, exposure.
 * Returns false when nothing can change any more.
 */
export function beginStep(n: i32): bool {
  while (nextRelease < plan.releases && load<i32>(plan.releaseSteps + (nextRelease << 2)) == n) {
    release(load<f64>(plan.releaseFractions + (nextRelease << 3)))
    nextRelease++
    power = 1
  }
  if (detaches) detach()
  if (notReady > 0) ripen()
  if (filled0 + filled1 == plan.siteCount && notReady == 0 && nextRelease == plan.releases && !detaches) return false
  factor = plan.declines != 0 ? plan.declineRest + (1 - plan.declineRest) * power : 1
  power *= plan.declinePerStep
  const weight = floor(factor * 65536)
  if (filled0 < sites0) addExposure(0, replicate, sites0 - filled0, weight)
  if (filled1 < sites1) addExposure(1, replicate, sites1 - filled1, weight)
  return true
}

/** Empty sites left. */
export function emptySites(): i32 {
  return plan.siteCount - filled0 - filled1
}
