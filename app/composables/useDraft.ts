/** Drafts of the scenario editor, kept on the device per account while typing and offered again after a reload. */
import type { EditorSnapshot } from './useEditorState'

export interface Draft extends EditorSnapshot {
  /** Revision the draft was made from; 0 for a scenario that was never saved. */
  revision: number
  keptAt: string
}
const KEEP_AFTER_MS = 300
/** Each tab keeps its own, so that two tabs on one scenario lose nothing to each other. */
const keysOf = (userId: string, scenarioId: string) => `moorage:draft:${userId}:${scenarioId}:`
const TAB = 'moorage:tab'

/** Name of this tab: it survives a reload and ends with the tab. */
function tabName(): string {
  try {
    const name = sessionStorage.getItem(TAB) ?? crypto.randomUUID()
    sessionStorage.setItem(TAB, name)
    return name
  } catch {
    return 'only'
  }
}
/** This tab's draft, else the newest that a tab left: that one may be closed. */
function findDraft(prefix: string, own: string): { key: string, draft: Draft } | undefined {
  const mine = readDraft(own)
  if (mine) return { key: own, draft: mine }
  try {
    return Object.keys(localStorage).filter(key => key.startsWith(prefix)).flatMap((key) => {
      const draft = readDraft(key)
      return draft ? [{ key, draft }] : []
    }).sort((a, b) => b.draft.keptAt.localeCompare(a.draft.keptAt))[0]
  } catch {
    return undefined
  }
}

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
  const prefix = keysOf(userId, scenarioId)
  const key = `${prefix}${import.meta.client ? tabName() : ''}`
  let found: string | undefined
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
      // What another tab left was taken over here and is settled with it.
      if (found) localStorage.removeItem(found)
    } catch { /* nothing was kept, so nothing is lost */ }
    found = undefined
  }
  const restore = () => {
    const kept = findDraft(prefix, key)
    if (kept) keptAt.value = kept.draft.keptAt
    found = kept?.key
    return kept?.draft
  }
  if (import.meta.client) addEventListener('pagehide', flush)
  onScopeDispose(() => {
    flush()
    if (import.meta.client) removeEventListener('pagehide', flush)
  })
  return { keptAt: readonly(keptAt), failed: readonly(failed), keep, restore, drop }
}
