/** Drafts of the scenario editor, kept on the device per account while typing and offered again after a reload. */
import type { EditorSnapshot } from './useEditorState'

export interface Draft extends EditorSnapshot {
  /** Revision the draft was made from; 0 for a scenario that was never saved. */
  revision: number
  keptAt: string
}
const KEEP_AFTER_MS = 300
const keyOf = (userId: string, scenarioId: string) => `moorage:draft:${userId}:${scenarioId}`

function readDraft(key: string): Draft | undefined {
  try {
    const text = localStorage.getItem(key)
    const draft = text ? JSON.parse(text) as Draft : undefined
    return draft?.document && draft.wrong && Number.isInteger(draft.revision) ? draft : undefined
  } catch {
    return undefined
  }
}

/** Keeps what is typed within 0.3 s; `keptAt` is null when nothing is kept, `failed` when the device refuses to keep it. */
export function useDraft(userId: string, scenarioId: string) {
  const key = keyOf(userId, scenarioId)
  const keptAt = shallowRef<string | null>(null)
  const failed = shallowRef(false)
  let timer: ReturnType<typeof setTimeout> | undefined
  let pending: (() => void) | undefined

  function write(snapshot: EditorSnapshot, revision: number) {
    const draft: Draft = { ...snapshot, revision, keptAt: new Date().toISOString() }
    try {
      localStorage.setItem(key, JSON.stringify(draft))
      keptAt.value = draft.keptAt
      failed.value = false
    } catch {
      failed.value = true
    }
  }
  function keep(snapshot: EditorSnapshot, revision: number) {
    clearTimeout(timer)
    pending = () => write(snapshot, revision)
    timer = setTimeout(flush, KEEP_AFTER_MS)
  }
  function flush() {
    clearTimeout(timer)
    pending?.()
    pending = undefined
  }
  function drop() {
    clearTimeout(timer)
    pending = undefined
    keptAt.value = null
    try {
      localStorage.removeItem(key)
    } catch { /* nothing was kept, so nothing is lost */ }
  }
  const restore = () => {
    const draft = readDraft(key)
    if (draft) keptAt.value = draft.keptAt
    return draft
  }
  if (import.meta.client) addEventListener('pagehide', flush)
  onScopeDispose(() => {
    flush()
    if (import.meta.client) removeEventListener('pagehide', flush)
  })
  return { keptAt: readonly(keptAt), failed: readonly(failed), keep, restore, drop }
}
