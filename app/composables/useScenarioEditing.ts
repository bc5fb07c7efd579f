/** Saving, drafts, conflicts and setting a run going, for one scenario under the pen. */
import type { ScenarioDetail, StaleEdit } from '#shared/schemas/api/scenario'
import { scenarioDifferences, type Difference } from '#shared/schemas/differences'
import type { Scenario } from '#shared/schemas/scenario'
import { fetchRunPages } from '~/utils/runPages'
import { DEFAULT_RUN, type RunSettings } from '~/utils/runSettings'

export interface EditConflict { current: StaleEdit, from: number, differences: Difference[] }

export function useScenarioEditing(detail: () => ScenarioDetail | null, start: Scenario) {
  const session = useSessionStore()
  const runs = useRunsStore()
  const api = useScenarioApi()
  const state = useEditorState(start)
  const run = ref<RunSettings>({ ...DEFAULT_RUN })
  const tags = ref<string[]>([...detail()?.tags ?? []])
  const message = ref('')
  const conflict = shallowRef<EditConflict | null>(null)
  /** Revision that the text on the page was made from: older than the saved one when a draft was. */
  const from = ref(detail()?.revision ?? 0)
  const draft = useDraft(session.me?.userId ?? 'nobody', detail()?.scenarioId ?? 'new')

  const maySave = computed(() => detail()?.mayEdit ?? session.allows('scenario.create'))
  const tagsEdited = computed(() => JSON.stringify(tags.value) !== JSON.stringify(detail()?.tags ?? []))
  const standing = computed(() => {
    if (session.role === 'trainee') return 'Your walk runs and stays on this device: trainees write down what they expect first, and predictions come with the ledger.'
    return maySave.value ? '' : 'You can change and run this here. Your role does not save it; a copy of your own would be.'
  })

  onMounted(() => {
    // A run may be set going after the connection went.
    void fetchRunPages()
    const kept = draft.restore()
    if (kept) {
      state.restart(detail()?.document ?? start, { document: kept.document, wrong: kept.wrong })
      from.value = kept.revision
      const now = detail()
      if (now && now.revision > kept.revision && state.edited.value)
        conflict.value = { current: { revision: now.revision, author: now.updatedBy, savedAt: now.updatedAt }, from: kept.revision, differences: scenarioDifferences(now.document, kept.document) }
    }
    watch(state.now, (snapshot) => {
      if (state.edited.value) draft.keep(snapshot, from.value)
      else draft.drop()
    })
  })

  function settle(saved: ScenarioDetail) {
    draft.drop()
    conflict.value = null
    message.value = ''
    from.value = saved.revision
    tags.value = [...saved.tags]
    state.restart(saved.document)
    return saved
  }
  const edit = () => ({ document: state.now.value.document, message: message.value, tags: tags.value })

  async function save(over = from.value): Promise<ScenarioDetail | undefined> {
    const now = detail()
    try {
      if (!now) return settle(await api.create(session.bench!.benchId, edit()))
      if (!state.edited.value) return settle(await api.tag(now.scenarioId, tags.value))
      return settle(await api.save(now.scenarioId, over, edit()))
    } catch (thrown) {
      const refusal = refusalOf(thrown)
      if (refusal.code !== 'moved_on' || !now) throw thrown
      const current = refusal.current as StaleEdit
      const theirs = await api.load(now.scenarioId)
      conflict.value = { current, from: from.value, differences: scenarioDifferences(theirs.document, state.now.value.document) }
    }
  }
  async function keepAsCopy() {
    const document = { ...state.now.value.document, title: `${state.now.value.document.title} (copy)`.slice(-200) }
    const copy = await api.create(session.bench!.benchId, { ...edit(), document })
    draft.drop()
    await navigateTo(`/scenarios/${copy.scenarioId}`)
  }
  async function takeTheirs() {
    const now = detail()
    if (now) return settle(await api.load(now.scenarioId))
  }
  const saveOverTheirs = () => save(conflict.value?.current.revision)

  /** Saves first where that is allowed, so that the run belongs to a revision; else the run stays on this device. */
  async function setGoing(): Promise<ScenarioDetail | undefined> {
    const saved = maySave.value && (state.edited.value || !detail()) ? await save() : detail() ?? undefined
    if (conflict.value) return
    const belongs = saved !== undefined && !state.edited.value
    await fetchRunPages()
    const { aim, replicates, standardError, seed, algorithm } = run.value
    const localId = runs.start({
      scenario: state.drawable.value, scenarioId: belongs ? saved.scenarioId : null, revision: belongs ? saved.revision : null,
      title: state.drawable.value.title, seed, replicates, algorithm,
      ...(aim === 'precision' && { targetStandardError: standardError }),
    })
    await navigateTo(`/runs/under-way/${localId}`)
    return saved
  }
  function goBack() {
    draft.drop()
    from.value = detail()?.revision ?? 0
    state.restart(detail()?.document ?? state.base.value)
  }

  return {
    state, run, tags, message, conflict: readonly(conflict) as Readonly<Ref<EditConflict | null>>, draft, maySave, tagsEdited, standing,
    locked: ref(false), savedName: computed(() => detail() ? `revision ${detail()!.revision}` : ''),
    save, keepAsCopy, takeTheirs, saveOverTheirs, setGoing, goBack,
  }
}
