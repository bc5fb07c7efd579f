/** The keys of a page: what they do, said once, for the listener and for the list that `?` opens. */
export interface Key { keys: string, does: string, act?: () => void, /** Also while typing in a field. */ inFields?: boolean }

const typing = (target: EventTarget | null) => target instanceof HTMLElement && (target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName))

/** Name of a pressed key: `Ctrl+Enter`, `Alt+S`, `?`. Command counts as Ctrl. */
export function nameOfKey(event: Pick<KeyboardEvent, 'key' | 'ctrlKey' | 'metaKey' | 'altKey'>): string {
  const key = event.key.length === 1 ? event.key.toUpperCase() : event.key
  return `${event.ctrlKey || event.metaKey ? 'Ctrl+' : ''}${event.altKey ? 'Alt+' : ''}${key}`
}

export const useKeyList = () => useState<Pick<Key, 'keys' | 'does'>[]>('keys', () => [])

/** Listens for as long as the page stands. Single keys obey the person's switch; with a modifier they always act. */
export function useKeys(keys: Key[]) {
  const list = useKeyList()
  const preferences = usePreferencesStore()
  const lines = keys.map(({ keys: name, does }) => ({ keys: name, does }))
  function listen(event: KeyboardEvent) {
    const name = nameOfKey(event)
    const single = !name.includes('+')
    if (single && preferences.singleKeys === 'off') return
    const key = keys.find(one => one.act && one.keys === name && (one.inFields || !typing(event.target)))
    if (!key) return
    event.preventDefault()
    key.act!()
  }
  onMounted(() => {
    list.value = [...list.value, ...lines]
    window.addEventListener('keydown', listen)
  })
  onBeforeUnmount(() => {
    list.value = list.value.filter(line => !lines.some(one => one.keys === line.keys && one.does === line.does))
    window.removeEventListener('keydown', listen)
  })
}
