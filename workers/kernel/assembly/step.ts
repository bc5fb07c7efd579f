/** The step-by-step walk of every vesicle: valid for both crowding rules, the oracle of the faster samplers. */
import { Plan } from './plan'
import { seedStream } from './rng'
import { beginStep, countSites, openSites, sampleAt, sampleRest } from './sites'
import { openTally } from './tally'
import { letIn, moveVesicles, placeVesicles } from './vesicles'

/** Walks replicates [from, to). */
export function walkStep(plan: Plan, tally: usize, low: u32, high: u32, from: i32, to: i32): void {
  openTally(plan, tally, to - from)
  countSites(plan)
  for (let replicate = from; replicate < to; replicate++) {
    seedStream(low, high, replicate)
    openSites(plan, replicate - from)
    placeVesicles(plan)
    for (let n = 0; ; n++) {
      sampleAt(n)
      if (n == plan.steps) break
      if (!beginStep(n)) {
        sampleRest()
        break
      }
      moveVesicles(plan, n)
      letIn(plan)
    }
  }
}
