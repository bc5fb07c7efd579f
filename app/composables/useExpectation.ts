/** What to expect of the scenario under the pen: closed form at once, a quick walk of fixed seed behind it. */
import { closedForm, siteTotal } from '#shared/kinetics/closed-form'
import type { Outcome } from '#shared/schemas/outcome'
import type { Scenario } from '#shared/schemas/scenario'
import { previewRefusal } from '#shared/walk/cost'
import { notExactBecause } from '#shared/kinetics/isolated'
import type { ExactRefill, RunResult } from '~~/workers/protocol'
import { closedFormSeries, walkSeries } from '~/utils/expectedCurves'
import type { FigureSeries } from '~/utils/figureSeries'

export type PreviewState = 'walking' | 'drawn' | 'too-large' | 'failed'
/** Enough for a mean to about ±0.01 of the sites, few enough to follow the typing. */
export const PREVIEW_REPLICATES = 60
/** A preview that would take longer than this is not walked [s]. */
const MOST_SECONDS = 4
/** Typing pauses shorter than this do not start a walk [ms]. */
const SETTLE_MS = 25

/** A preview is read at some hundreds of times: thousands would be counted, sent and drawn at every keystroke. */
const PREVIEW_SAMPLES = 400
function coarselySampled(scenario: Scenario): Scenario {
  const { schedule } = scenario
  return { ...scenario, schedule: { ...schedule, sampleEveryMs: Math.max(schedule.sampleEveryMs, schedule.durationS * 1000 / PREVIEW_SAMPLES) } }
}

export function useExpectation(scenario: Readonly<Ref<Scenario>>, saved: Readonly<Ref<Scenario | null>>) {
  const crew = useCrew()
  const preview = shallowRef<Outcome | null>(null)
  /** The exact refill of an isolated site: drawn instead of trusting a noisy walk, which stands beside it. */
  const exact = shallowRef<ExactRefill | null>(null)
  const previewState = shallowRef<PreviewState>('walking')
  const previewReason = shallowRef('')
  /** What figures and numbers are of: they follow the field in a task of their own, so that no key waits for a drawing. */
  const shown = shallowRef({ now: scenario.value, before: saved.value })
  const formula = computed(() => closedForm(shown.value.now))
  const savedFormula = computed(() => shown.value.before ? closedForm(shown.value.before) : null)
  const sites = computed(() => siteTotal(shown.value.now.ribbon))

  let asked = 0
  async function solve(one: Scenario, mine: number) {
    if (notExactBecause(one) !== null) return void (exact.value = null)
    const found = await crew.exact(one).catch(() => null)
    if (mine === asked) exact.value = found
  }
  async function walk(typed: Scenario) {
    const mine = ++asked
    const one = coarselySampled(typed)
    void solve(one, mine)
    const refusal = previewRefusal(one, MOST_SECONDS, crew.pace)
    if (refusal) {
      preview.value = null
      previewState.value = 'too-large'
      previewReason.value = refusal
      return
    }
    previewState.value = 'walking'
    try {
      let drawn = 0
      const draw = async (result: RunResult) => {
        const outcome = await crew.conclude(one, result)
        if (mine !== asked || outcome.replicates <= drawn) return
        drawn = outcome.replicates
        preview.value = outcome
        if (drawn >= PREVIEW_REPLICATES) previewState.value = 'drawn'
      }
      const result = await crew.preview(one, PREVIEW_REPLICATES, growing => void draw(growing))
      if (result) await draw(result)
    } catch {
      if (mine === asked) previewState.value = 'failed'
    }
  }
  let timer: ReturnType<typeof setTimeout> | undefined, turn: ReturnType<typeof setTimeout> | undefined
  watch([scenario, saved], ([now, before]) => {
    clearTimeout(turn)
    turn = setTimeout(() => {
      shown.value = { now, before }
    })
  })
  onMounted(() => watch(scenario, (one) => {
    clearTimeout(timer)
    timer = setTimeout(() => walk(one), SETTLE_MS)
  }, { immediate: true }))
  onScopeDispose(() => {
    clearTimeout(turn)
    clearTimeout(timer)
  })

  const series = computed(() => {
    const { now, before: earlier } = shown.value
    const before = earlier
      ? [closedFormSeries(earlier, siteTotal(earlier.ribbon), 'earlier', 'Closed form, saved revision')]
      : []
    const solved: FigureSeries[] = exact.value
      ? [{ id: 'exact', kind: 'other', label: 'Exact, one site', note: 'linear solution, no noise', times: exact.value.timesS, values: exact.value.filled }]
      : []
    const walked = preview.value ? [walkSeries(preview.value, 'preview', `Preview walk, ${preview.value.replicates} replicates`)] : []
    return [...before, closedFormSeries(now, sites.value, 'closed-form', 'Closed form'), ...solved, ...walked]
  })
  return { formula, savedFormula, sites, series, exact: shallowReadonly(exact), preview: shallowReadonly(preview), previewState: readonly(previewState), previewReason: readonly(previewReason) }
}
export type Expectation = ReturnType<typeof useExpectation>
