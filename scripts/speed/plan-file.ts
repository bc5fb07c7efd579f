/** A compiled plan as a file that the C and numpy references read; layout in plan.h. */
import { gapTable } from '../../shared/walk/counts'
import { boundaryInflow } from '../../shared/walk/chances'
import { seedWords } from '../../shared/walk/streams'
import { hopOffsets } from '../../shared/walk/geometry'
import type { WalkPlan } from '../../shared/walk/types'
import { boundaryOf, freeVoxelsOf } from '../../workers/placing'

const padded = (array: Uint8Array | Int32Array | Uint32Array) => {
  const bytes = Buffer.from(array.buffer, array.byteOffset, array.byteLength)
  return Buffer.concat([bytes, Buffer.alloc((4 - bytes.length % 4) % 4)])
}

/**
 * The file's bytes.
 * @param plan - one vesicle class that always moves, no release, decline or detachment: what the references know
 * @param seed - seed text
 * @returns bytes in the machine's order
 */
export function planFile(plan: WalkPlan, seed: string): Buffer {
  const free = freeVoxelsOf(plan), boundary = boundaryOf(plan)
  const gaps = gapTable(boundaryInflow(plan).perFace)
  const [low, high] = seedWords(seed)
  const offsets = hopOffsets(plan.nx, plan.ny)
  const probabilities = plan.attachProbability.map(row => row[0]!)
  const head = [
    plan.crowding === 'exclusive' ? 1 : 0, plan.supply === 'held' ? 1 : 0, plan.flags.length, free.length, boundary.length, plan.siteCount, plan.sitesPerClass.length,
    plan.steps, plan.sampleSteps.length, plan.vesicles[0]!.number ?? 0, offsets[2]!, offsets[4]!, gaps.thresholds.length - 1,
  ]
  const reals = [plan.occupancy, probabilities[0]!, probabilities[1] ?? 0, Math.max(...probabilities)]
  return Buffer.concat([
    padded(Int32Array.from(head)), padded(Uint32Array.of(low, high, 0)), Buffer.from(Float64Array.from(reals).buffer),
    padded(plan.flags), padded(plan.siteBehind), padded(plan.voxelOfSite), padded(plan.classOfSite), padded(plan.sampleSteps),
    padded(free), padded(boundary), padded(gaps.guide), padded(gaps.thresholds),
  ])
}
