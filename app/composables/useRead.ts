/** Reads one answer from the server after the frame stands; follows its address, drops answers that come too late, keeps the old one while it reads again. */
export function useRead<Answer>(path: () => string | null) {
  const api = useApi()
  const answer = shallowRef<Answer>()
  const refusal = shallowRef<Refusal>()
  const loading = ref(true)
  let stop: AbortController | undefined

  async function reload(): Promise<void> {
    stop?.abort()
    const address = path()
    if (!address) {
      loading.value = false
      return
    }
    const own = stop = new AbortController()
    loading.value = true
    try {
      const read = await api<Answer>(address, { signal: own.signal })
      if (own !== stop) return
      answer.value = read
      refusal.value = undefined
    } catch (thrown) {
      if (own !== stop) return
      refusal.value = refusalOf(thrown)
    }
    loading.value = false
  }
  onMounted(reload)
  watch(path, reload)
  onBeforeUnmount(() => stop?.abort())
  return { answer, refusal, loading: readonly(loading), reload }
}
