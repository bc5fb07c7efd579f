/** The state of a list in its address, so that Back and a copied link bring the same list. */
export function useListQuery<Name extends string>(names: readonly Name[]) {
  const route = useRoute()
  const router = useRouter()
  const query = computed(() => Object.fromEntries(names.map((name) => {
    const value = route.query[name]
    return [name, typeof value === 'string' && value !== '' ? value : undefined]
  })) as Record<Name, string | undefined>)
  function set(changes: Partial<Record<Name, string | undefined>>): void {
    const next = { ...query.value, ...changes }
    const kept = Object.fromEntries(Object.entries(next).filter(([, value]) => value))
    void router.replace({ query: kept as Record<string, string>, hash: route.hash })
  }
  return { query, set }
}
