/** Landings after waits longer than the solved ones: the law from a uniform start is the waiting law read across the sites, since K is symmetric. */
import { lateBins } from '../shared/walk/attempt-size'
import type { LandingTask } from './attempt-landings'
import type { KernelHost } from './host'

export interface LateLaws {
  /** Upper ends of the late bins; the last is one step long here and serves all later waits [steps]. */
  ends: number[]
  /** [1 + late bin][parity][site]: the last solved bin's and each late bin's law from a uniform start. */
  laws: Float64Array
  /** [late bin][parity]: what is left of a start's own difference from it. */
  shares: Float64Array
}

/** A start's own difference from the uniform one fades as 1/step at first, as diffusion from a point does, and faster once walls are felt: as 1/step² from this many times the solved steps on (chosen by the full solves of tests/unit/attempt). */
const KNEE = 3

interface BinLaw { byClass: Float64Array, mass: number, inverse: number }

/** Waiting law summed over the steps from + 1 … to of one parity, by class of starts, and the sum weighted by how a start's own difference fades. */
function binLaw({ starts, waits }: LandingTask, law: Float32Array, from: number, to: number, parity: number, knee: number): BinLaw {
  const classes = starts.count, byClass = new Float64Array(classes)
  let mass = 0, inverse = 0
  for (let step = from + 1; step <= Math.min(to, waits.steps); step++) {
    if (step % 2 !== parity) continue
    for (let kind = 0; kind < classes; kind++) {
      const wait = law[(step - 1) * classes + kind]!
      byClass[kind] = byClass[kind]! + wait
      mass += wait
      inverse += wait / step * Math.min(1, knee / step)
    }
  }
  return { byClass, mass, inverse }
}

/** Adds what comes after the explicit steps: nothing of a start's own difference is left by then. Where no law is known at all, the last step stands in. */
function addTail({ starts, waits }: LandingTask, law: Float32Array, bin: BinLaw, parity: number): void {
  const offset = (waits.steps + 1) % 2 === parity ? 0 : 1, last = waits.steps - 1 + offset
  for (let kind = 0; kind < starts.count; kind++) {
    const tail = waits.tails[3 * kind + offset]!, wait = tail > 0 || bin.mass > 0 || last < 1 ? tail : law[(last - 1) * starts.count + kind]!
    bin.byClass[kind] = bin.byClass[kind]! + wait
  }
  bin.mass = bin.byClass.reduce((sum, wait) => sum + wait, 0)
}

/**
 * Laws of the late bins.
 * @param host - the kernel
 * @param task - classes, solved bins and waiting law
 * @param sites - number of sites [count]
 * @returns laws by site, and the shares of a start's own difference that are left
 */
export function lateLaws(host: KernelHost, task: LandingTask, sites: number): LateLaws {
  const { starts, waits } = task, solved = task.ends[task.ends.length - 1]!, before = task.ends[task.ends.length - 2] ?? 0
  const law = new Float32Array(host.exports.memory.buffer, waits.pointer, waits.steps * starts.count)
  const ends = lateBins(solved), laws = new Float64Array(2 * (ends.length + 1) * sites), shares = new Float64Array(2 * ends.length)
  const inverses: number[] = []
  for (let bin = 0; bin <= ends.length; bin++) {
    const [from, to] = bin === 0 ? [before, solved] : [bin === 1 ? solved : ends[bin - 2]!, bin === ends.length ? Infinity : ends[bin - 1]!]
    for (let parity = 0; parity < 2; parity++) {
      const summed = binLaw(task, law, from, to, parity, KNEE * solved)
      if (to === Infinity || to >= waits.steps) addTail(task, law, summed, parity)
      const { byClass, mass, inverse } = summed
      let total = 0
      for (let site = 0; site < sites; site++) total += byClass[starts.classOf[site]!]!
      for (let site = 0; site < sites; site++) laws[(2 * bin + parity) * sites + site] = total > 0 ? byClass[starts.classOf[site]!]! / total : 1 / sites
      const mean = mass > 0 ? inverse / mass : 0
      if (bin === 0) inverses.push(mean)
      else shares[2 * (bin - 1) + parity] = inverses[parity]! > 0 ? Math.min(1, mean / inverses[parity]!) : 0
    }
  }
  return { ends, laws, shares }
}
