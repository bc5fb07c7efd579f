/** The quick walk while someone edits: one warm worker, the newest question only, chunk after chunk. */
import { estimateCost, PREVIEW } from '../shared/walk/cost'
import { mergeBlocks } from '../shared/walk/merge'
import { routeAlgorithm } from '../shared/walk/route'
import type { Scenario } from '../shared/schemas/scenario'
import type { ReplicateBlock } from '../shared/walk/types'
import { KERNEL_VERSION } from './kernel/version'
import { WorkerLost, type Member } from './member'
import { Pace } from './pace'
import type { RunResult, WalkJob } from './protocol'

/** A superseded question may finish its chunk; after this the worker is ended for the newer one [ms]. */
const GRACE_MS = 250

export class Previewer {
  private newest = 0
  private busy: Promise<unknown> = Promise.resolve()

  constructor(private readonly member: Member, private readonly paceFactor: () => number) {}

  /** Resolves null when a newer call came; rejects when the scenario cannot be walked or two workers in a row were lost. */
  async preview(scenario: Scenario, replicates: number, onGrowth?: (result: RunResult) => void): Promise<RunResult | null> {
    const turn = ++this.newest
    await this.makeWay()
    if (turn !== this.newest) return null
    const walking = this.walk(turn, scenario, replicates, onGrowth)
    this.busy = walking.catch(() => {})
    return walking
  }

  private async makeWay(): Promise<void> {
    let timer: ReturnType<typeof setTimeout> | undefined
    const grace = new Promise<'late'>((resolve) => {
      timer = setTimeout(resolve, GRACE_MS, 'late')
    })
    if (await Promise.race([this.busy, grace]) === 'late') this.member.end('superseded')
    clearTimeout(timer)
  }

  private async walk(turn: number, scenario: Scenario, replicates: number, onGrowth?: (result: RunResult) => void): Promise<RunResult | null> {
    const route = routeAlgorithm(scenario)
    if (route.algorithm === null) throw new RangeError(route.refusal)
    const job: WalkJob = { scenario, algorithm: route.algorithm, seed: PREVIEW.seed }
    const started = performance.now(), pace = new Pace(estimateCost(scenario, replicates, 'auto', this.paceFactor()).secondsPerReplicate * 1000)
    const state = { whole: undefined as ReplicateBlock | undefined, landingError: 0 }
    const result = (): RunResult => ({
      engine: { name: 'moorage-walk', version: KERNEL_VERSION, algorithm: job.algorithm }, seed: job.seed, replicates: state.whole!.to, replicatesAsked: replicates,
      partial: state.whole!.to < replicates, blocks: [state.whole!], durationMs: performance.now() - started, workers: 1, landingError: state.landingError,
    })
    for (let lost = 0; ;) {
      try {
        if (!this.member.has(job)) state.landingError = (await this.member.prepare(job, 60_000)).landingError
        while ((state.whole?.to ?? 0) < replicates) {
          if (turn !== this.newest) return null
          const from = state.whole?.to ?? 0, to = Math.min(replicates, from + pace.chunk()), asked = performance.now()
          const chunk = await this.member.walk(from, to, pace.patienceMs(to - from))
          pace.note(to - from, performance.now() - asked)
          state.whole = state.whole ? mergeBlocks(state.whole, chunk) : chunk
          if (turn === this.newest && to < replicates) onGrowth?.(result())
        }
        return turn === this.newest ? result() : null
      } catch (fault) {
        if (turn !== this.newest) return null
        if (!(fault instanceof WorkerLost) || ++lost > 1) throw fault
      }
    }
  }
}
