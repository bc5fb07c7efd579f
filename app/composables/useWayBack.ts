/** Where to go after signing in: the address that turned the visitor away, if it is one of ours. */
export function useWayBack() {
  const route = useRoute()
  return computed(() => {
    const to = route.query.to
    return typeof to === 'string' && /^\/(?![/\\])/.test(to) ? to : '/bench'
  })
}
