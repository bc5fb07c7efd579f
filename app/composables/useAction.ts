/** One thing a person sets off: whether it is under way, and why it was refused. */
export function useAction<Arguments extends unknown[], Result>(act: (...given: Arguments) => Promise<Result>) {
  const busy = ref(false)
  const refusal = shallowRef<Refusal>()
  async function run(...given: Arguments): Promise<Result | undefined> {
    if (busy.value) return
    busy.value = true
    refusal.value = undefined
    try {
      return await act(...given)
    } catch (thrown) {
      refusal.value = refusalOf(thrown)
    } finally {
      busy.value = false
    }
  }
  return { run, busy: readonly(busy), refusal }
}
