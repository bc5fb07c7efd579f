/** A real step-by-step walk for the terminal's pictures, stepped in a worker of its own; started on first need, ended with the page. */
import { wrap, type Remote } from 'comlink'
import { closedForm } from '#shared/kinetics/closed-form'
import { stepSeconds, type Scenario } from '#shared/schemas/scenario'
import { voxelCounts } from '#shared/walk/frame'
import { sceneRefusal, type DensitySection, type SceneFrame, type ScenePlace } from '~~/workers/scene'
import type { SceneOffices } from '~~/workers/scene.worker'

/** Frames a second while it plays: enough to follow a vesicle by eye. */
const FRAMES_PER_S = 12
/** The first picture is not further on than this, in steps and in voxel-steps of its density (about 2 s of a worker). */
const MOST_FIRST_STEPS = 400
const MOST_VOXEL_STEPS = 1.5e8
export const SCENE_SPEEDS = [1, 5, 25] as const

/** A quarter of the quicker kind's τ: early enough to see the neighbourhood emptied [s]. */
function firstTime(scenario: Scenario): number {
  const taus = closedForm(scenario).classes.map(kind => kind.tauS).filter((tau): tau is number => tau !== null)
  const step = stepSeconds(scenario.medium)
  const wanted = taus.length > 0 ? Math.min(...taus) / 4 : scenario.schedule.durationS / 10
  const most = Math.max(1, Math.min(MOST_FIRST_STEPS, Math.floor(MOST_VOXEL_STEPS / Math.max(1, voxelCounts(scenario).voxels))))
  return Math.min(Math.max(wanted, step), most * step, scenario.schedule.durationS)
}

export function useTerminalScene(scenario: () => Scenario, seed: () => string) {
  const place = shallowRef<ScenePlace | null>(null)
  const frame = shallowRef<SceneFrame | null>(null)
  const section = shallowRef<DensitySection | null>(null)
  const playing = ref(false)
  const speed = ref<number>(SCENE_SPEEDS[0])
  const problem = ref('')
  const refusal = computed(() => sceneRefusal(scenario()))
  const still = ref(false)
  let worker: Worker | undefined
  let offices: Remote<SceneOffices> | undefined
  let timer: ReturnType<typeof setTimeout> | undefined
  let motion: MediaQueryList | undefined

  function end() {
    playing.value = false
    clearTimeout(timer)
    worker?.terminate()
    worker = offices = undefined
  }
  async function open(): Promise<void> {
    end()
    if (refusal.value) return
    problem.value = ''
    try {
      worker = new Worker(new URL('../../workers/scene.worker.ts', import.meta.url), { type: 'module', name: 'scene' })
      const own = worker
      own.onerror = () => {
        problem.value = 'The walk for this picture could not be started in this browser.'
        playing.value = false
      }
      offices = wrap<SceneOffices>(own)
      const one = scenario()
      place.value = await offices.open(one, seed())
      const timeS = firstTime(one)
      frame.value = await offices.advance(Math.max(1, Math.round(timeS / place.value.stepS)))
      section.value = await offices.section(one, timeS)
    } catch (thrown) {
      problem.value = thrown instanceof Error ? thrown.message : String(thrown)
    }
  }
  async function advance(steps: number): Promise<void> {
    if (!offices || frame.value?.ended) return
    // Contours belong to the first picture's time; a moving walk is shown without them.
    section.value = null
    frame.value = await offices.advance(steps)
    if (frame.value.ended) playing.value = false
  }
  async function tick() {
    if (!playing.value) return
    const startedAt = performance.now()
    await advance(speed.value)
    timer = setTimeout(tick, Math.max(0, 1000 / FRAMES_PER_S - (performance.now() - startedAt)))
  }
  function play() {
    if (playing.value || still.value) return
    playing.value = true
    void tick()
  }
  function stop() {
    playing.value = false
    clearTimeout(timer)
  }
  const readMotion = () => {
    still.value = motion?.matches ?? false
    if (still.value) stop()
  }
  onMounted(() => {
    motion = matchMedia('(prefers-reduced-motion: reduce)')
    motion.addEventListener('change', readMotion)
    readMotion()
    void open()
  })
  onBeforeUnmount(() => {
    motion?.removeEventListener('change', readMotion)
    end()
  })
  return { place, frame, section, playing: readonly(playing), speed, problem: readonly(problem), refusal, still: readonly(still), play, stop, step: () => advance(speed.value), again: open }
}
