/** The scenario under the pen: last good values, texts that were typed but cannot be used, undo and redo. */
import { fieldProblems, type FieldProblem } from '#shared/schemas/problem'
import { ScenarioSchema, type Scenario } from '#shared/schemas/scenario'
import { leavesOf } from '#shared/schemas/differences'
import { valueAt, withValue } from '~/utils/paths'

export interface EditorSnapshot {
  document: Scenario
  /** Path → text as typed that could not be read or lies outside its field's range; the document keeps the last good value. */
  wrong: Record<string, string>
}
const UNDO_STEPS = 50
/** Keystrokes in one field within this time are one step of undo [ms]. */
const SAME_STEP_MS = 900

export function useEditorState(start: Scenario) {
  const base = shallowRef(start)
  const now = shallowRef<EditorSnapshot>({ document: start, wrong: {} })
  const past = shallowRef<EditorSnapshot[]>([])
  const future = shallowRef<EditorSnapshot[]>([])
  let lastPath = '', lastAt = 0

  function step(path: string, next: EditorSnapshot) {
    const at = Date.now()
    if (path !== lastPath || at - lastAt > SAME_STEP_MS) past.value = [...past.value, now.value].slice(-UNDO_STEPS)
    lastPath = path
    lastAt = at
    future.value = []
    now.value = next
  }
  /** A value that its field could read. */
  function set(path: string, value: unknown) {
    const { [path]: _, ...wrong } = now.value.wrong
    if (Object.is(valueAt(now.value.document, path), value) && !(path in now.value.wrong)) return
    step(path, { document: withValue(now.value.document, path, value), wrong })
  }
  /** A text that its field could not use: kept as typed. */
  function setWrong(path: string, text: string) {
    if (now.value.wrong[path] === text) return
    step(path, { ...now.value, wrong: { ...now.value.wrong, [path]: text } })
  }
  /** Several values at once (a kind added, a shape chosen): one step of undo; wrong texts below replaced parts go. */
  function replace(path: string, value: unknown) {
    const wrong = Object.fromEntries(Object.entries(now.value.wrong).filter(([key]) => key !== path && !key.startsWith(`${path}.`)))
    lastPath = ''
    step(path, { document: withValue(now.value.document, path, value), wrong })
    lastPath = ''
  }
  function swap(from: typeof past, to: typeof past) {
    const next = from.value.at(-1)
    if (!next) return
    to.value = [...to.value, now.value]
    from.value = from.value.slice(0, -1)
    now.value = next
    lastPath = ''
  }
  function restart(document: Scenario, snapshot?: EditorSnapshot) {
    base.value = document
    now.value = snapshot ?? { document, wrong: {} }
    past.value = future.value = []
  }

  const parsed = computed(() => ScenarioSchema.safeParse(now.value.document))
  /** Problems of the whole document, by path; wrong texts are told by their own fields. */
  const problems = computed<FieldProblem[]>(() => parsed.value.success ? [] : fieldProblems(parsed.value.error.issues))
  /** Last document that may be drawn and walked. */
  const drawable = shallowRef(start)
  watch(parsed, (result) => {
    if (result.success) drawable.value = result.data
  }, { immediate: true })
  const baseLeaves = computed(() => leavesOf(base.value))
  const leaves = computed(() => leavesOf(now.value.document))

  return {
    base, now, problems, drawable,
    wrongCount: computed(() => new Set([...Object.keys(now.value.wrong), ...problems.value.map(one => one.path)]).size),
    edited: computed(() => Object.keys(now.value.wrong).length > 0 || JSON.stringify(now.value.document) !== JSON.stringify(base.value)),
    changed: (path: string) => path in now.value.wrong || !Object.is(leaves.value.get(path), baseLeaves.value.get(path)),
    problemAt: (path: string) => problems.value.find(one => one.path === path)?.message,
    set, setWrong, replace, restart,
    undo: () => swap(past, future), redo: () => swap(future, past),
    canUndo: computed(() => past.value.length > 0), canRedo: computed(() => future.value.length > 0),
  }
}
export type EditorState = ReturnType<typeof useEditorState>
