/** The walk of the sample in this browser: set going, stopped, its outcome built here and kept nowhere. */
import { SAMPLE_SEED } from '#shared/almanac/demo-scenarios'
import type { Outcome } from '#shared/schemas/outcome'
import type { Scenario } from '#shared/schemas/scenario'

export const SAMPLE_REPLICATES = 200

export interface SampleWalk { scenario: Scenario, outcome: Outcome, durationMs: number, workers: number, done: boolean }

export function useSampleRun() {
  const crew = useCrew()
  const progress = useScaleProgress()
  const walk = shallowRef<SampleWalk>()
  const status = ref<'idle' | 'running' | 'done' | 'stopped' | 'failed'>('idle')
  const replicatesDone = ref(0)
  let abort: AbortController | undefined

  async function setGoing(scenario: Scenario): Promise<void> {
    if (status.value === 'running') return
    const own = abort = new AbortController()
    status.value = 'running'
    replicatesDone.value = progress.value = 0
    try {
      const result = await crew.run({ scenario, seed: SAMPLE_SEED, replicates: SAMPLE_REPLICATES, algorithm: 'auto' }, {
        signal: own.signal,
        onProgress: (now) => {
          replicatesDone.value = now.replicatesDone
          progress.value = now.replicatesDone / now.replicates
        },
      })
      if (result.blocks.length > 0) {
        const outcome = await crew.conclude(scenario, result)
        walk.value = { scenario, outcome, durationMs: result.durationMs, workers: result.workers, done: !result.partial }
      }
      status.value = result.partial ? 'stopped' : 'done'
    } catch {
      status.value = 'failed'
    } finally {
      progress.value = null
    }
  }
  const stop = () => abort?.abort()
  const forget = () => {
    walk.value = undefined
    status.value = 'idle'
  }
  onBeforeUnmount(() => {
    stop()
    progress.value = null
  })
  return { walk, status: readonly(status), replicatesDone: readonly(replicatesDone), setGoing, stop, forget }
}
