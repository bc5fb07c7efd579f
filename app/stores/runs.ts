/** Runs on this device: they go on while the person moves inside the application, and are kept until the bench has them. */
import type { ReplicateBlock } from '#shared/walk/types'
import { newLocalRun, wantedReplicates, wouldBeLost, type LocalRun, type RunStart } from '~/utils/localRun'

/** Finished runs that are kept in this page's list; older ones stay on the device. */
const LIST_LENGTH = 50

/** So long the device remembers where a run that it sent is saved [d]. */
const POINTER_DAYS = 7

export const useRunsStore = defineStore('runs', () => {
  const session = useSessionStore()
  const progress = useScaleProgress()
  const outbox = useOutbox()
  const list = shallowRef<LocalRun[]>([])
  /** False as soon as the browser refused to keep an outcome: private mode, or storage full. */
  const deviceKeeps = shallowRef(true)
  const stops = new Map<string, AbortController>()
  const blocksOf = new Map<string, ReplicateBlock[]>()
  let walking: ReturnType<typeof useRunWalk> | undefined

  const userId = () => session.me?.userId ?? 'nobody'
  const sending = useRunSending(settled, run => run.userId === userId())
  const find = (localId: string) => list.value.find(run => run.localId === localId && run.userId === userId()) ?? null
  const running = computed(() => list.value.filter(run => run.state === 'running'))
  const unsent = computed(() => list.value.filter(run => run.send.state === 'unsent' || run.send.state === 'sending'))
  const mine = computed(() => list.value.filter(run => run.userId === userId() && run.asked.purpose === 'run' && !(run.send.state === 'sent' && run.outcome === null)))
  const atRisk = computed(() => list.value.some(wouldBeLost))
  watch(() => {
    const newest = running.value.findLast(run => run.asked.purpose === 'run') ?? running.value.at(-1)
    return newest ? newest.replicatesDone / wantedReplicates(newest.asked) : null
  }, (share) => { progress.value = share })

  /** Whatever the server said, the device's copy says it too; a saved one needs no copy of its numbers. */
  async function settled(run: LocalRun) {
    if (run.asked.purpose !== 'run') return
    if (run.send.state !== 'sent') return keep(run, blocksOf.get(run.localId) ?? [])
    // What is left on the device is the way to the saved run, for an address that somebody still has open.
    await outbox.keep({ ...run, outcome: null, precision: [] }, [])
    await close(run.localId)
  }
  async function keep(run: LocalRun, blocks: ReplicateBlock[]) {
    const kept = await outbox.keep(run, blocks)
    run.kept = kept ? 'device' : 'memory'
    deviceKeeps.value = kept
  }
  async function close(localId: string) {
    blocksOf.delete(localId)
    sending.forget(localId)
    await (await useOutcomeDesk()).close(localId)
  }

  /** Sets a run going and returns its name on this device at once. */
  function start(order: RunStart): string {
    if (!(order.replicates >= 1)) throw new RangeError('A run has at least one replicate.')
    const run = shallowReactive(newLocalRun(order, userId(), new Date().toISOString()))
    list.value = [...list.value, run].slice(-LIST_LENGTH)
    void go(run)
    return run.localId
  }
  async function go(run: LocalRun) {
    const controller = new AbortController()
    stops.set(run.localId, controller)
    // Queued behind another run, its time begins with its first progress.
    const alone = running.value.length === 1
    const timer = run.asked.timeLimitS && alone ? setTimeout(() => controller.abort(), run.asked.timeLimitS * 1000) : undefined
    try {
      walking ??= useRunWalk()
      const blocks = await walking.walk(run, controller.signal, () => controller.abort())
      if (run.outcome && run.asked.purpose === 'run') await finished(run, blocks)
      else await close(run.localId)
    } catch (thrown) {
      run.problem = `The run broke off: ${thrown instanceof Error ? thrown.message : String(thrown)}.`
      run.state = 'failed'
    } finally {
      clearTimeout(timer)
      stops.delete(run.localId)
    }
  }
  async function finished(run: LocalRun, blocks: ReplicateBlock[]) {
    blocksOf.set(run.localId, blocks)
    await keep(run, blocks)
    if (run.send.state === 'unsent') await sending.send(run)
  }

  /** Keeps the contiguous prefix of replicates and calls it partial. */
  function cancel(localId: string) {
    const run = find(localId)
    if (run?.state === 'running') run.stopping = true
    stops.get(localId)?.abort()
  }
  async function sendNow(localId: string) {
    const run = find(localId)
    if (run && run.send.state !== 'sent') {
      run.send = { ...run.send, state: 'unsent', reason: null }
      await sending.send(run)
    }
  }
  /** Takes a run off this device for good. */
  async function discard(localId: string) {
    const run = find(localId)
    if (!run) return
    cancel(localId)
    list.value = list.value.filter(other => other !== run)
    await outbox.drop(run.userId, localId)
    await close(localId)
  }
  /** The blocks of a finished run that is still here, for raw replicates and files. */
  const rawBlocks = (localId: string): ReplicateBlock[] => blocksOf.get(localId) ?? []

  async function adopt(kept: { run: LocalRun, blocks: ReplicateBlock[] }) {
    if (list.value.some(run => run.localId === kept.run.localId)) return
    const run = shallowReactive({ ...kept.run, kept: 'device' as const, send: { ...kept.run.send, state: kept.run.send.state === 'sending' ? 'unsent' as const : kept.run.send.state } })
    list.value = [...list.value, run].sort((a, b) => a.startedAt.localeCompare(b.startedAt))
    if (kept.blocks.length === 0) return
    blocksOf.set(run.localId, kept.blocks)
    const desk = await useOutcomeDesk()
    await desk.open(run.localId, run.asked.scenario, run.asked.seed)
    await desk.add(run.localId, kept.blocks)
    if (run.send.state === 'unsent') void sending.send(run)
  }
  /** Brings back what this device keeps for the person who is signed in; what others keep here stays closed. */
  async function restore() {
    const own = userId()
    list.value = list.value.filter(run => run.userId === own || run.state === 'running')
    const old = new Date(Date.now() - POINTER_DAYS * 86_400_000).toISOString()
    for (const kept of await outbox.all(own))
      if (kept.run.send.state === 'sent' && (kept.run.finishedAt ?? '') < old) await outbox.drop(own, kept.run.localId)
      else await adopt(kept)
  }
  function retryAll() {
    for (const run of list.value) if (run.send.state === 'unsent' && run.userId === userId()) void sending.send(run)
  }

  return { list, running, unsent, mine, atRisk, deviceKeeps, start, cancel, find, sendNow, discard, rawBlocks, restore, retryAll }
})
