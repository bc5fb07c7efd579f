/** The exact refill of one isolated site by independent vesicles: survival of emptiness from the flux into an always-empty site. */
import type { Scenario } from '../schemas/scenario'
import type { WalkPlan } from '../walk/types'
import { cumulativeFlux, type CumulativeFlux } from './isolated-flux'
import { linearLattice } from './linear-lattice'

export interface IsolatedExact {
  method: 'exact-linear'
  /** Mean filled sites at plan.sampleSteps, those filled at the start included [1]. */
  filled: number[]
  /** The same for ready ones; null where capture is readiness [1]. */
  ready: number[] | null
  /** Expected exposure over expected attachments within the duration: what the walk's τ tends to [s]. */
  tauS: number | null
  /** Steps solved before the last mode was continued [steps]. */
  solvedSteps: number
}

/** Voxel-steps at about 6 ns each: a margin of 12 takes 1e6, of 24 3e7, a sealed terminal of 39³ 7e7. */
const BUDGET = 1e8
const MOST_LOOPED = 5_000_000

/**
 * Why `exactIsolatedFilled` does not answer for a scenario; null when it does (unless its budget is exceeded).
 * @param scenario - with defaults filled in
 * @returns a sentence, or null [1]
 */
export function notExactBecause(scenario: Scenario): string | null {
  const { ribbon, reservoir, medium, sites, schedule } = scenario
  if (ribbon.shape !== 'isolated') return 'Sites of a plate share one neighbourhood; only a walk tells.'
  if (reservoir.supply === 'stirred') return 'With stirred supply the closed form itself is the answer.'
  if (medium.crowding === 'exclusive') return 'Vesicles that exclude each other are not independent; only a walk tells.'
  if (sites[0]!.detachPerS > 0) return 'A vesicle that detaches comes back to its own site; only a walk tells.'
  if (schedule.releases.length > 0) return 'After a later release the neighbourhood remembers; only a walk tells.'
  return null
}

/** −log of the probability that the site is still empty after n steps: Poisson start in a held box, exactly N vesicles in a sealed one. */
function emptinessLog(plan: WalkPlan, parts: { flux: CumulativeFlux, share: number, number: number | null }[]) {
  return (n: number) => parts.reduce((sum, { flux, share, number }) => {
    const within = flux.within(n)
    return sum + (number === null ? plan.occupancy * share * within : -number * Math.log1p(-Math.min(1, within / plan.freeVoxels)))
  }, 0)
}

/** Σ S(n) over n = 0 … steps − 1: expected steps that the site stands empty. Geometric once the flux is steady. */
function emptySteps(survival: (n: number) => number, steps: number, steadyFrom: number, hazard: number): number | null {
  const looped = Math.min(steps, steadyFrom)
  if (looped > MOST_LOOPED) return null
  let sum = 0
  for (let n = 0; n < looped; n++) {
    const s = survival(n)
    sum += s
    if (s < 1e-17) return sum
  }
  if (steps > looped) sum += survival(looped) * Math.expm1(-hazard * (steps - looped)) / Math.expm1(-hazard)
  return sum
}

/** Ready sites by the per-step chance, from the filled ones: R(n + 1) = R(n) + r·(F(n) − R(n)); sites filled at the start are ready. */
function readyCurve(filledAt: (n: number) => number, plan: WalkPlan, perStep: number): number[] | null {
  if (plan.steps > MOST_LOOPED) return null
  const curve: number[] = []
  let ready = plan.initialFill, next = 0
  for (let n = 0; next < plan.sampleSteps.length; n++) {
    if (plan.sampleSteps[next] === n) {
      curve.push(ready)
      next++
    }
    ready += perStep * (filledAt(n) - ready)
  }
  return curve
}

/** Factor of decline in step k → k + 1 and the step from which it is at rest to 1e-13. */
function declineOf(plan: WalkPlan) {
  if (!plan.decline) return undefined
  const { restFactor, perStep } = plan.decline
  return { factor: (k: number) => restFactor + (1 - restFactor) * perStep ** k, constantFrom: perStep > 0 ? Math.ceil(Math.log(1e-13) / Math.log(perStep)) : 1 }
}

/**
 * Exact mean refill of an isolated site. For independent walkers the chance that it is still empty after n steps is exp(−Σ Jₘ) with a Poisson start (held) and Π (1 − qᵢ)^Nᵢ with exactly Nᵢ vesicles (sealed), Jₘ and q from the linear lattice solution.
 * Several kinds of vesicle (a slower one is a lazy walk), decline, initial fill and readiness are covered; see `notExactBecause` for what is not.
 * @param scenario - with defaults filled in
 * @param plan - compiled from it
 * @param budget - most voxel-steps to spend on each kind of vesicle [1]
 * @returns curve at plan.sampleSteps [1] and τ [s], or null where it does not apply or the budget does not reach
 */
export function exactIsolatedFilled(scenario: Scenario, plan: WalkPlan, budget = BUDGET): IsolatedExact | null {
  if (notExactBecause(scenario) !== null) return null
  const lattice = linearLattice(plan)
  const parts: { flux: CumulativeFlux, share: number, number: number | null }[] = []
  for (const [i, vesicle] of plan.vesicles.entries()) {
    const attach = plan.attachProbability[0]![i]!
    if (vesicle.mobilityFactor === 0 || attach === 0) continue
    const flux = cumulativeFlux(lattice, { attach, mobility: vesicle.mobilityFactor, steps: plan.steps, bath: plan.supply === 'held' ? 1 : 0, decline: declineOf(plan), budget, longestAxis: Math.max(plan.nx, plan.ny, plan.nz) })
    if (!flux) return null
    parts.push({ flux, share: vesicle.share, number: vesicle.number })
  }
  const log = emptinessLog(plan, parts)
  const filledAt = (n: number) => 1 - (1 - plan.initialFill) * Math.exp(-log(n))
  const steadyFrom = parts.length === 0 ? 0 : Math.max(...parts.map(part => part.flux.steadyFrom))
  const hazard = parts.reduce((sum, { flux, share }) => sum + plan.occupancy * share * flux.steady, 0)
  const empty = parts.length === 0 ? null : emptySteps(n => Math.exp(-log(n)), plan.steps, steadyFrom, hazard)
  const readyPerStep = plan.readyPerStep[0] ?? null
  const ready = readyPerStep === null ? null : readyCurve(filledAt, plan, readyPerStep)
  if ((parts.length > 0 && empty === null) || (readyPerStep !== null && ready === null)) return null
  return {
    method: 'exact-linear',
    filled: Array.from(plan.sampleSteps, filledAt),
    ready,
    tauS: empty === null ? null : empty * plan.stepS / -Math.expm1(-log(plan.steps)),
    solvedSteps: parts.reduce((most, part) => Math.max(most, part.flux.solved), 0),
  }
}
