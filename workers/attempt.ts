/** `attempt`: independent vesicles from a held or sealed supply, sampled from one effective attempt to the next. */
import { ATTEMPT_SITE_LIMIT, attemptCeiling } from '../shared/walk/attempt-size'
import type { WalkPlan } from '../shared/walk/types'
import { TableCache } from './attempt-cache'
import { attemptExports, type Scratch } from './attempt-kernel'
import { placeAttempt } from './attempt-placing'
import type { TableSet } from './attempt-tables'
import { packTables, unpackTables } from './attempt-transfer'
import type { KernelHost } from './host'
import type { PlacedPlans } from './placing'
import type { PreparedWalk } from './protocol'
import { runTallied } from './tally'

/** Argument blocks kept at a time. */
const KEPT_RUNS = 4

interface PlacedRun { plan: WalkPlan, sets: (TableSet | null)[], pointer: number, scratch: Scratch }

/** The attempt sampler of one kernel. */
export class AttemptEngine {
  readonly cache: TableCache
  private readonly runs: PlacedRun[] = []

  constructor(private readonly host: KernelHost, private readonly plans: PlacedPlans) {
    this.cache = new TableCache(host)
  }

  /** Tables by vesicle class; classes of one mobility share a set. */
  private setsOf(plan: WalkPlan): (TableSet | null)[] {
    return plan.vesicles.map(({ mobilityFactor }) => {
      const ceiling = mobilityFactor > 0 ? attemptCeiling(plan, mobilityFactor) : 0
      return ceiling > 0 ? this.cache.tablesOf(plan, ceiling, mobilityFactor) : null
    })
  }

  private runOf(plan: WalkPlan): PlacedRun {
    const at = this.runs.findIndex(run => run.plan === plan)
    if (at >= 0) {
      const [run] = this.runs.splice(at, 1)
      this.runs.push(run!)
      if (run!.sets.every(set => set?.pointer !== 0)) return run!
      this.runs.pop()!.scratch.release()
    }
    const sets = this.setsOf(plan), run = { plan, sets, ...placeAttempt(this.host, plan, sets) }
    this.runs.push(run)
    if (this.runs.length > KEPT_RUNS) this.runs.shift()!.scratch.release()
    return run
  }

  private adopt(plan: WalkPlan, tables: ArrayBuffer): void {
    for (const { mobility, set } of unpackTables(this.host, tables))
      this.cache.adopt(plan, set.attemptChance, mobility, set)
  }

  /** Prepares a plan. Tables are built when first needed, so that a worker may adopt another's instead. */
  prepare(plan: WalkPlan): PreparedWalk {
    if (plan.siteCount > ATTEMPT_SITE_LIMIT) throw new RangeError(`attempt samples up to ${ATTEMPT_SITE_LIMIT} sites; this plan has ${plan.siteCount}.`)
    const sets = () => [...new Set(this.runOf(plan).sets.filter(set => set !== null))]
    return {
      algorithm: 'attempt',
      get tableBytes() { return sets().reduce((sum, set) => sum + set.bytes, 0) },
      get landingError() { return sets().reduce((most, set) => Math.max(most, set.landingError), 0) },
      exportTables: () => packTables(this.host, sets().map(set => ({ set, mobility: plan.vesicles[this.runOf(plan).sets.indexOf(set)]!.mobilityFactor }))),
      adoptTables: tables => this.adopt(plan, tables),
      run: (low, high, from, to) => {
        const { pointer } = this.runOf(plan), placed = this.plans.pointerOf(plan)
        return runTallied(this.host, plan, from, to, tally => attemptExports(this.host).walkAttempt(placed, pointer, tally, low, high, from, to))
      },
    }
  }
}
