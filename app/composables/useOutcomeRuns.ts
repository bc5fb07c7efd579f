/** The runs that an outcome can set going: again, on, with a new seed, step by step. Checks are found again after leaving the page. */
import { KERNEL_VERSION } from '~~/workers/kernel/version'
import type { AskedAlgorithm } from '#shared/walk/types'
import type { OutcomeSubject } from '~/utils/outcomeSubject'

export function useOutcomeRuns(subject: () => OutcomeSubject) {
  const runs = useRunsStore()
  const cannotRepeat = ref('')
  const asked = (): AskedAlgorithm => {
    const { algorithm } = subject().outcome.engine
    return algorithm === 'stirred' ? 'auto' : algorithm
  }
  const common = () => {
    const { scenario, scenarioId, revision, title } = subject()
    return { scenario, scenarioId, revision, title }
  }
  /** The newest run for a purpose that belongs to this very outcome. */
  const ofThis = (purpose: 'again' | 'check') => computed(() => runs.list.findLast(run => run.asked.purpose === purpose && run.asked.of === subject().outcome.digest) ?? null)
  const again = ofThis('again')
  const check = ofThis('check')

  function runAgain() {
    const { outcome, replicatesAsked } = subject()
    if (outcome.engine.version !== KERNEL_VERSION) {
      cannotRepeat.value = `Cannot be re-run here: the outcome comes from engine ${outcome.engine.version}, and this application has ${KERNEL_VERSION}.`
      return
    }
    runs.start({
      ...common(), seed: outcome.seed, replicates: Math.max(replicatesAsked, outcome.replicates), algorithm: asked(), purpose: 'again', of: outcome.digest,
      ranges: outcome.blocks.map(({ from, to }) => ({ from, to })),
    })
  }
  function startCheck(minutes: number) {
    const { outcome } = subject()
    if (check.value?.state === 'running') return
    runs.start({
      ...common(), seed: `${outcome.seed.slice(0, 180)}, step check`, replicates: Math.max(outcome.replicates, 50) * minutes, algorithm: 'step', purpose: 'check', of: outcome.digest, timeLimitS: minutes * 60,
    })
  }
  async function underWay(seed: string, replicates: number) {
    const localId = runs.start({ ...common(), seed, replicates, algorithm: asked() })
    await navigateTo(`/runs/under-way/${localId}`)
  }
  const runNewSeed = () => underWay('', subject().replicatesAsked)
  const runOn = (replicates: number) => underWay(subject().outcome.seed, Math.max(replicates, subject().outcome.replicates + 1))
  return { again, check, cannotRepeat: readonly(cannotRepeat), runAgain, startCheck, runNewSeed, runOn, stop: runs.cancel }
}
