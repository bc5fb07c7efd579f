/** A list that comes in pages: the first when its address changes, the next on request. Rows may be changed in place after an action. */
import type { Page } from '#shared/schemas/api/bench'

export function usePaged<Row>(path: () => string | null, query: () => Record<string, string | undefined>) {
  const api = useApi()
  const rows = shallowRef<Row[]>([])
  const nextCursor = ref<string | null>(null)
  const refusal = shallowRef<Refusal>()
  const loading = ref(true)
  /** True once a first answer came: only then may a page call itself empty. */
  const known = ref(false)
  let turn = 0

  async function read(cursor?: string): Promise<void> {
    const address = path()
    if (!address) {
      loading.value = false
      return
    }
    const own = ++turn
    loading.value = true
    try {
      const page = await api<Page<Row>>(address, { query: { ...query(), cursor } })
      if (own !== turn) return
      rows.value = cursor ? [...rows.value, ...page.rows] : page.rows
      nextCursor.value = page.nextCursor
      refusal.value = undefined
      known.value = true
    } catch (thrown) {
      if (own !== turn) return
      refusal.value = refusalOf(thrown)
    }
    loading.value = false
  }
  const reload = () => read()
  const more = () => nextCursor.value ? read(nextCursor.value) : Promise.resolve()
  onMounted(reload)
  watch(() => JSON.stringify([path(), query()]), reload)
  return { rows, nextCursor: readonly(nextCursor), refusal, loading: readonly(loading), known: readonly(known), reload, more }
}
