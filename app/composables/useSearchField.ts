/** A search field whose words come into the page's address once typing rests. */

/** Shorter rests than this do not ask [ms]. */
const REST_MS = 250

export function useSearchField(start: string | undefined, set: (search: string | undefined) => void) {
  const search = ref(start ?? '')
  let timer: ReturnType<typeof setTimeout> | undefined
  watch(search, (typed) => {
    clearTimeout(timer)
    timer = setTimeout(() => set(typed.trim().slice(0, 200) || undefined), REST_MS)
  })
  onBeforeUnmount(() => clearTimeout(timer))
  return search
}
