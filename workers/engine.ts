/** The kernel behind the protocol: one WASM instance, one way to prepare each algorithm. */
import type { Algorithm, WalkPlan } from '../shared/walk/types'
import { AttemptEngine } from './attempt'
import { KernelHost, type WalkCall } from './host'
import { KERNEL_VERSION } from './kernel/version'
import { PlacedPlans } from './placing'
import type { Kernel, PreparedWalk } from './protocol'
import { runnerOf } from './tally'
import { prepareTouch } from './touch'
import { TouchTables } from './touch-tables'

/** A walk without tables: exact, nothing to hand over. */
function prepareTableless(host: KernelHost, plans: PlacedPlans, plan: WalkPlan, algorithm: 'stirred' | 'step'): PreparedWalk {
  const walk: WalkCall = algorithm === 'stirred' ? host.exports.walkStirred : host.exports.walkStep
  return {
    algorithm, tableBytes: 0, landingError: 0,
    exportTables: () => null,
    adoptTables: () => {},
    run: runnerOf(host, plan, () => plans.pointerOf(plan), walk),
  }
}

/** Which algorithm a plan admits; anything else would not be that plan's law. */
function refuseMismatch(plan: WalkPlan, algorithm: Algorithm): void {
  if ((plan.supply === 'stirred') !== (algorithm === 'stirred'))
    throw new RangeError(`A plan with ${plan.supply} supply cannot be walked by ${algorithm}.`)
  if (plan.crowding === 'exclusive' && (algorithm === 'touch' || algorithm === 'attempt'))
    throw new RangeError(`${algorithm} samples independent vesicles; exclusion is walked by step.`)
}

/**
 * Instantiates the kernel.
 * @param wasm - the compiled module, or the bytes of kernel.wasm
 * @returns the kernel
 */
export async function createKernel(wasm: WebAssembly.Module | BufferSource): Promise<Kernel> {
  const module = wasm instanceof WebAssembly.Module ? wasm : await WebAssembly.compile(wasm)
  const host = new KernelHost(await WebAssembly.instantiate(module, {}))
  const plans = new PlacedPlans(host), pointerOf = (plan: WalkPlan) => plans.pointerOf(plan)
  const attempt = new AttemptEngine(host, plans)
  const touchTables = new TouchTables(host, pointerOf)
  return {
    version: KERNEL_VERSION,
    prepare(plan, algorithm) {
      refuseMismatch(plan, algorithm)
      if (algorithm === 'stirred' || algorithm === 'step') return prepareTableless(host, plans, plan, algorithm)
      if (algorithm === 'touch') return prepareTouch(host, plan, touchTables, pointerOf)
      return attempt.prepare(plan)
    },
  }
}
