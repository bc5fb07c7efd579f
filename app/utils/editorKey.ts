/** How the parts of the scenario form find the editor's state without handing it through every level. */
import type { InjectionKey } from 'vue'
import type { EditorState } from '~/composables/useEditorState'

export interface EditorContext {
  state: EditorState
  /** Reading only: a guest's or an old revision's view. */
  locked: Ref<boolean>
  /** Path → caution with its source, from published ranges. */
  cautions: ComputedRef<Record<string, { sentence: string, source?: string }>>
  /** What the last saved revision is called in notes; empty when there is none. */
  savedName: ComputedRef<string>
}
export const EDITOR: InjectionKey<EditorContext> = Symbol('scenario editor')

export function useEditor(): EditorContext {
  const context = inject(EDITOR)
  if (!context) throw new Error('useEditor: no scenario editor above this component')
  return context
}
