/** Starts, queues, stops and replaces workers. One run at a time; a preview has a worker of its own. */
import { routeAlgorithm } from '../shared/walk/route'
import { Member, type WorkerHandle } from './member'
import { Previewer } from './preview'
import type { Crew, RunOrder, RunProgress, RunResult } from './protocol'
import { RunUnderWay } from './run-under-way'

export interface CrewOptions {
  createWorker: () => WorkerHandle
  /** Workers that walk a run [1]. */
  size: number
  /** Workers end after so long without work [ms]. */
  idleMs?: number
}

/** Workers that a machine should have: one a core, at most 8. */
export const crewSize = (cores: number | undefined): number => Math.max(1, Math.min(8, cores ?? 2))

export function createCrew({ createWorker, size, idleMs = 30_000 }: CrewOptions): Crew {
  const members = Array.from({ length: size }, () => new Member(createWorker))
  const apart = new Member(createWorker) // keeps the preview warm, and makes outcomes
  let paceFactor = 1
  const previewer = new Previewer(apart, () => paceFactor)
  let queue: Promise<unknown> = Promise.resolve()
  let idle: ReturnType<typeof setTimeout> | undefined

  function rest(): void {
    clearTimeout(idle)
    idle = setTimeout(() => members.forEach(member => member.end('idle')), idleMs)
    // Under Node the timer must not keep the process alive.
    if (typeof idle === 'object') (idle as { unref?: () => void }).unref?.()
  }

  async function walk(order: RunOrder, options: { onProgress?: (progress: RunProgress) => void, signal?: AbortSignal }): Promise<RunResult> {
    const route = routeAlgorithm(order.scenario, order.algorithm)
    if (route.algorithm === null) throw new RangeError(route.refusal)
    clearTimeout(idle)
    const run = new RunUnderWay(order, route.algorithm, members, paceFactor, options.onProgress)
    try {
      return await run.go(options.signal)
    } finally {
      paceFactor *= run.pace.factor ?? 1
      rest()
    }
  }

  return {
    size,
    get pace() {
      return paceFactor
    },
    run(order, options = {}) {
      const mine = queue.then(() => walk(order, options))
      queue = mine.catch(() => {})
      return mine
    },
    preview: (scenario, replicates, onGrowth) => previewer.preview(scenario, replicates, onGrowth),
    conclude: (scenario, result) => apart.conclude(scenario, result),
    exact: scenario => apart.exact(scenario),
    dismiss() {
      clearTimeout(idle)
      for (const member of [...members, apart]) member.end('dismissed')
    },
  }
}
